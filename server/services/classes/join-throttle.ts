import type { Database } from '../../data/database.ts';
import { ProblemError } from '../problem-error.ts';

const WINDOW_MS = 10 * 60 * 1000;
/** Wrong codes from one address in ten minutes, over all processes. A school's many people share one address. */
export const WRONG_CODES = 60;

/** Counts wrong join codes in the database, so that all processes share the limit. */
export function createJoinThrottle({ database, now }: { database: Database; now: () => Date }) {
  const windowStart = (): Date => new Date(Math.floor(now().getTime() / WINDOW_MS) * WINDOW_MS);
  const keyOf = (address: string | null): string => `join:${address ?? 'unknown'}`;
  return {
    /** @throws {ProblemError} throttled */
    async check(address: string | null): Promise<void> {
      const start = windowStart();
      if ((await database.throttles.count(keyOf(address), start)) < WRONG_CODES) return;
      const retryAfterS = Math.ceil((start.getTime() + WINDOW_MS - now().getTime()) / 1000);
      throw new ProblemError(
        'throttled',
        `Too many wrong codes. Try again in ${Math.ceil(retryAfterS / 60)} minutes.`,
        {
          retryAfterS,
        },
      );
    },
    wrong: (address: string | null): Promise<void> => database.throttles.add(keyOf(address), windowStart()),
    tidy: (): Promise<void> => database.throttles.removeBefore(new Date(now().getTime() - 2 * WINDOW_MS)),
  };
}
