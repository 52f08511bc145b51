import { QueryFailedError } from 'typeorm';

/** True when a unique index refused a row: someone else wrote it meanwhile. */
export function isDuplicateKey(error: unknown): boolean {
  return error instanceof QueryFailedError && Reflect.get(error.driverError, 'code') === 'ER_DUP_ENTRY';
}
