import type { Database } from '../../data/database.ts';
import type { CloseAttempt } from '../attempts/complete-attempt.ts';
import { createClassAttempts } from './class-attempts.ts';
import { createClassChunks } from './class-chunks.ts';
import { createClassControls } from './class-controls.ts';
import { createClassLogStore } from './class-log-store.ts';
import { createClassPages } from './class-pages.ts';
import { createClassScenarios } from './class-scenarios.ts';
import { createGuestPasses } from './guest-passes.ts';
import { createJoinThrottle } from './join-throttle.ts';
import { createMembership } from './membership.ts';

export interface ClassServicesSetup {
  database: Database;
  tokenSecret: string;
  close: CloseAttempt;
  now: () => Date;
}

/** A class in which nothing has happened for so long is ended. */
const FORGOTTEN_AFTER_MS = 12 * 3600 * 1000;

/** All use cases of live classes. */
export function createClassServices({ database, tokenSecret, close, now }: ClassServicesSetup) {
  const log = createClassLogStore({ database, now });
  const scenarios = createClassScenarios({ database });
  const guestPasses = createGuestPasses(tokenSecret, now);
  const throttle = createJoinThrottle({ database, now });
  const attempts = createClassAttempts({ database, log, scenarios, close, now });
  const controls = createClassControls({ log, attempts, scenarios });
  return {
    log,
    scenarios,
    guestPasses,
    attempts,
    chunks: createClassChunks({ database, log, attempts, now }),
    membership: createMembership({ database, log, guestPasses, throttle, now }),
    controls,
    pages: createClassPages({ database, log, attempts, scenarios, now }),
    addRefused: (classId: string, count: number): Promise<void> => database.classes.addRefused(classId, count),
    nowMs: (): number => now().getTime(),
    async tidy(): Promise<void> {
      await throttle.tidy();
      const quietSinceMs = now().getTime() - FORGOTTEN_AFTER_MS;
      for (const id of await database.classes.quietSince(new Date(quietSinceMs)))
        await controls.endForgotten(id, quietSinceMs);
    },
  };
}
export type ClassServices = ReturnType<typeof createClassServices>;
