/** Personal access tokens for programs: what they may reach, and how they are made and listed. */
import { z } from 'zod';

/** First parts of the addresses that a token may reach. Sessions, tokens and live classes stay with the browser. */
export const TOKEN_AREAS = [
  'airframes',
  'studies',
  'reports',
  'scenarios',
  'attempts',
  'remarks',
  'playlists',
  'assignments',
  'records',
  'people',
  'cohorts',
  'organisation',
  'outbox',
  'system',
  'audit',
] as const;
export type TokenArea = (typeof TOKEN_AREAS)[number];

/** Every scope: an area, then whether it only reads or writes too. Writing holds reading. */
export const TOKEN_SCOPES = TOKEN_AREAS.flatMap((area) => [`${area}:read`, `${area}:write`] as const);
export type TokenScope = (typeof TOKEN_SCOPES)[number];
export const tokenScopeSchema = z.enum(TOKEN_SCOPES as [TokenScope, ...TokenScope[]]); // not empty: see above

/** Begins every token, so that a search of files for lost secrets finds it. */
export const TOKEN_PREFIX = 'swt_';
export const LONGEST_TOKEN_DAYS = 366;
export const MOST_TOKENS = 20;

export const newTokenSchema = z.strictObject({
  name: z.string().trim().min(1).max(80),
  scopes: z.array(tokenScopeSchema).min(1).max(TOKEN_SCOPES.length),
  /** Days until it ends. */
  days: z.number().int().min(1).max(LONGEST_TOKEN_DAYS),
});
export type NewToken = z.infer<typeof newTokenSchema>;

export const accessTokenSchema = z.object({
  id: z.uuid(),
  name: z.string(),
  /** Its first characters, enough to tell tokens apart. */
  beginning: z.string(),
  scopes: z.array(tokenScopeSchema),
  createdAt: z.string(),
  expiresAt: z.string(),
  lastUsedAt: z.string().nullable(),
  state: z.enum(['valid', 'expired', 'revoked']),
});
export type AccessToken = z.infer<typeof accessTokenSchema>;
export const tokenListSchema = z.object({ items: z.array(accessTokenSchema) });

/** The answer to making one: the only time that the token itself is shown. */
export const madeTokenSchema = accessTokenSchema.extend({ token: z.string() });
export type MadeToken = z.infer<typeof madeTokenSchema>;

/** Same key and same request within a day: done once, answered twice. */
export const IDEMPOTENCY_HEADER = 'idempotency-key';
export const REPLAYED_HEADER = 'idempotency-replayed';
export const idempotencyKeySchema = z.string().regex(/^[\x21-\x7e]{8,200}$/u, {
  error: 'must be 8 to 200 printable ASCII characters without spaces',
});
