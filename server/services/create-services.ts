import type { Database } from '../data/database.ts';
import { createCompleteAttempt } from './attempts/complete-attempt.ts';
import { createReadAttempts } from './attempts/read-attempts.ts';
import { createStartAttempt } from './attempts/start-attempt.ts';
import { createStoreChunk } from './attempts/store-chunk.ts';
import { createAirframesService } from './library/airframes.service.ts';
import { createScenariosService } from './library/scenarios.service.ts';
import { createAccessTokens } from './sessions/access-tokens.ts';
import { createPasswords } from './sessions/passwords.ts';
import { createSessionNotices } from './sessions/session-notices.ts';
import { createSessionsService } from './sessions/sessions.service.ts';
import { createWorkerPool } from './workers/worker-pool.ts';

export interface ServicesSetup {
  database: Database;
  tokenSecret: string;
  now?: () => Date;
}

/** All use cases over one database, with the threads they need. `close` ends the threads. */
export function createServices({ database, tokenSecret, now = () => new Date() }: ServicesSetup) {
  const passwordThreads = createWorkerPool('password', 1);
  const reruns = createWorkerPool('rerun', 2);
  const passwords = createPasswords(passwordThreads);
  return {
    database,
    passwords,
    sessions: createSessionsService({
      database,
      passwords,
      accessTokens: createAccessTokens(tokenSecret, now),
      notices: createSessionNotices(),
      now,
    }),
    airframes: createAirframesService({ database }),
    scenarios: createScenariosService({ database }),
    attempts: {
      start: createStartAttempt({ database, now }),
      storeChunk: createStoreChunk({ database, now }),
      complete: createCompleteAttempt({ database, reruns, now }),
      ...createReadAttempts({ database, now }),
    },
    close: async (): Promise<void> => {
      await Promise.all([passwordThreads.close(), reruns.close()]);
    },
  };
}
export type Services = ReturnType<typeof createServices>;
