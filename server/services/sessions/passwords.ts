import { MAX_PASSWORD_BYTES } from '#shared/contracts/session.ts';
import { z } from 'zod';
import type { WorkerPool } from '../workers/worker-pool.ts';

/** bcrypt work factor: 2^10 rounds, about 60 ms a password in a worker thread here (measured). */
const COST = 10;
/** Hash at {@link COST} of a random password nobody has: compared with when there is no account, so that the time tells nothing. */
const NOBODY = '$2b$10$vNmfgXA2O/vJwPjQrG.dtemv8ttWkSbUwQqA4mGgubnV8sytBXohi';

export interface Passwords {
  hash(password: string): Promise<string>;
  /** False for a null hash, after the same work. */
  matches(password: string, hash: string | null): Promise<boolean>;
}

export function createPasswords(pool: WorkerPool): Passwords {
  return {
    async hash(password) {
      if (Buffer.byteLength(password) > MAX_PASSWORD_BYTES) {
        throw new RangeError(`A password has at most ${MAX_PASSWORD_BYTES} bytes.`);
      }
      return z.string().parse(await pool.run({ kind: 'hash', password, cost: COST }));
    },
    async matches(password, hash) {
      const same = z.boolean().parse(await pool.run({ kind: 'compare', password, hash: hash ?? NOBODY }));
      return same && hash !== null && Buffer.byteLength(password) <= MAX_PASSWORD_BYTES;
    },
  };
}
