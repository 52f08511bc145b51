import process from 'node:process';
import { MODEL_VERSION } from '#shared/scenario/run-types.ts';
import { STORAGE_AREAS, type StorageArea, type SystemState } from '#shared/contracts/system.ts';
import { PROGRAM_VERSION } from '../../config/program-version.ts';
import type { Database } from '../../data/database.ts';
import type { MailRoute } from '../mail/outbox.service.ts';
import { type Actor, requireDeed } from '../permissions.ts';
import { type FolderPart, folderSizes } from './folder-sizes.ts';
import { watchLoopDelay } from './loop-delay.ts';

/** What only the process around the services knows. */
export interface Surroundings {
  dataFolder: string | null;
  /** Resolves when Redis answers; null without one. */
  pingRedis: (() => Promise<unknown>) | null;
}

const FOLDER_KEPT_MS = 30_000;
const ANSWER_WITHIN_MS = 2000;

/** First match decides; tables are named by what they hold. */
const AREAS: readonly [RegExp, StorageArea][] = [
  [
    /^(?:person|session|refresh_token|account_link|cohort|organisation|first_set_up|access_token|idempotency|throttle)/,
    'People',
  ],
  [/^(?:airframe|study|report_count)/, 'Airframes'],
  [/^(?:scenario|playlist|budget)/, 'Scenarios'],
  [/^(?:class|live_class)/, 'Classes'],
  [/^(?:outbox_mail|notice_mail)/, 'Mail'],
  [/^audit/, 'Audit trail'],
  [/^(?:attempt_chunk|attempt$)/, 'Flights'],
  [/^(?:attempt_result|remark|sign_off|correction|record|statement|assignment|retention)/, 'Records'],
];
export const areaOf = (table: string): StorageArea => AREAS.find(([pattern]) => pattern.test(table))?.[1] ?? 'Other';

export function createSystemService(setup: {
  database: Database;
  mailRoute: () => MailRoute;
  surroundings: () => Surroundings;
  now: () => Date;
}) {
  const { database, mailRoute, surroundings, now } = setup;
  const loop = watchLoopDelay();
  let sizes: { at: number; path: string; parts: FolderPart[] } | null = null;

  const folder = async (): Promise<SystemState['storage']['folder']> => {
    const { dataFolder } = surroundings();
    if (dataFolder === null) return null;
    const at = performance.now();
    if (sizes === null || sizes.path !== dataFolder || at - sizes.at > FOLDER_KEPT_MS) {
      sizes = { at, path: dataFolder, parts: await folderSizes(dataFolder) };
    }
    return { path: dataFolder, parts: sizes.parts };
  };

  return {
    async state(actor: Actor): Promise<SystemState> {
      requireDeed(actor, 'system.read');
      const { pingRedis } = surroundings();
      const databaseMs = await timed(() => database.ping());
      const redisMs = pingRedis === null ? null : await timed(pingRedis);
      const [tables, mail, lastError, lastBackup, mariadb, migration, parts] = await Promise.all([
        database.system.tables(),
        database.system.mail(actor.organisationId),
        database.system.lastMailError(actor.organisationId),
        database.system.lastBackup(actor.organisationId),
        database.system.version(),
        database.system.migration(),
        folder(),
      ]);
      const of = (state: 'waiting' | 'sent' | 'refused') => mail.find((row) => row.state === state);
      const areas = STORAGE_AREAS.map((area) => {
        const own = tables.filter(({ name }) => areaOf(name) === area);
        const sum = (key: 'bytes' | 'rowCount'): number => own.reduce((total, table) => total + table[key], 0);
        return { area, bytes: sum('bytes'), rows: sum('rowCount') };
      });
      return {
        takenAt: now().toISOString(),
        health: {
          databaseMs,
          redis: pingRedis === null ? 'off' : redisMs === null ? 'away' : 'answers',
          redisMs,
          loopDelayMs: loop.read(),
          upS: process.uptime(),
          memoryBytes: process.memoryUsage.rss(),
        },
        mail: {
          ...mailRoute(),
          waiting: of('waiting')?.count ?? 0,
          refused: of('refused')?.count ?? 0,
          sent: of('sent')?.count ?? 0,
          failing: of('waiting')?.failing ?? 0,
          oldestWaitingAt: of('waiting')?.oldest?.toISOString() ?? null,
          lastSentAt: of('sent')?.latest?.toISOString() ?? null,
          lastError,
        },
        storage: {
          areas,
          folder: parts,
          outboxBytes: tables.find(({ name }) => name === 'outbox_mail')?.bytes ?? 0,
          lastBackup: lastBackup === null ? null : { ...lastBackup, at: lastBackup.at.toISOString() },
        },
        versions: { program: PROGRAM_VERSION, node: process.version, mariadb, migration, model: MODEL_VERSION },
      };
    },
    close: loop.close,
  };
}

/** Milliseconds until it answers; null when it fails or takes longer than two seconds. */
async function timed(ask: () => Promise<unknown>): Promise<number | null> {
  const start = performance.now();
  let timer: NodeJS.Timeout | undefined;
  const late = new Promise<boolean>((resolve) => {
    timer = setTimeout(() => resolve(false), ANSWER_WITHIN_MS);
  });
  const answered = ask().then(
    () => true,
    () => false,
  );
  const inTime = await Promise.race([answered, late]);
  clearTimeout(timer);
  return inTime ? performance.now() - start : null;
}
