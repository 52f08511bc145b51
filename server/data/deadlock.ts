import { setTimeout as pause } from 'node:timers/promises';
import { QueryFailedError } from 'typeorm';
import { z } from 'zod';

const TRIES = 8;
const PAUSE_MS = 8;

const driverErrorSchema = z.object({ code: z.string() });

function lostADeadlock(error: unknown): boolean {
  if (!(error instanceof QueryFailedError)) return false;
  const driverError = driverErrorSchema.safeParse(error.driverError);
  return driverError.success && driverError.data.code === 'ER_LOCK_DEADLOCK';
}

/**
 * The result of a transaction, begun again when the database rolled it back to end a deadlock.
 *
 * @param transact - One whole transaction; runs up to eight times.
 * @throws Whatever `transact` throws that is not a deadlock, and the last deadlock.
 */
export async function untilNoDeadlock<T>(transact: () => Promise<T>): Promise<T> {
  for (let attempt = 1; ; attempt++) {
    try {
      return await transact();
    } catch (error) {
      if (attempt === TRIES || !lostADeadlock(error)) throw error;
      await pause(PAUSE_MS * attempt * (0.5 + Math.random()));
    }
  }
}
