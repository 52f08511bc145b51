/** State of the server for its administrator: storage, mail, versions, health. */
import { z } from 'zod';

const bytes = z.number().min(0);
export const STORAGE_AREAS = [
  'People',
  'Airframes',
  'Scenarios',
  'Flights',
  'Classes',
  'Records',
  'Mail',
  'Audit trail',
  'Other',
] as const;
export const storageAreaSchema = z.enum(STORAGE_AREAS);
export type StorageArea = z.infer<typeof storageAreaSchema>;

export const systemStateSchema = z.object({
  takenAt: z.iso.datetime(),
  health: z.object({
    /** Answer time of the database; null when it did not answer. */
    databaseMs: z.number().min(0).nullable(),
    /** `off` without one: then this process serves alone. */
    redis: z.enum(['off', 'answers', 'away']),
    redisMs: z.number().min(0).nullable(),
    /** How late the process comes to its work, over the last minute. */
    loopDelayMs: z.object({ median: z.number().min(0), p99: z.number().min(0), longest: z.number().min(0) }),
    upS: z.number().min(0),
    memoryBytes: bytes,
  }),
  mail: z.object({
    /** `host:port` of the configured server, or null for the local sink. */
    server: z.string().nullable(),
    sinkFolder: z.string().nullable(),
    waiting: z.number().int(),
    refused: z.number().int(),
    sent: z.number().int(),
    /** Of those that wait and have failed at least once. */
    failing: z.number().int(),
    oldestWaitingAt: z.iso.datetime().nullable(),
    lastSentAt: z.iso.datetime().nullable(),
    lastError: z.string().nullable(),
  }),
  storage: z.object({
    /** Sizes that the database reports for tables and their indexes; rows are its estimate. */
    areas: z.array(z.object({ area: storageAreaSchema, bytes, rows: z.number().int().min(0) })),
    /** Top folders of the data folder with what is in them; null where no data folder is known. */
    folder: z
      .object({ path: z.string(), parts: z.array(z.object({ name: z.string(), bytes, files: z.number().int() })) })
      .nullable(),
    outboxBytes: bytes,
    lastBackup: z.object({ at: z.iso.datetime(), file: z.string(), bytes, rows: z.number().int().min(0) }).nullable(),
  }),
  versions: z.object({
    program: z.string(),
    node: z.string(),
    mariadb: z.string(),
    /** Name of the newest schema migration. */
    migration: z.string(),
    model: z.string(),
  }),
});
export type SystemState = z.infer<typeof systemStateSchema>;
