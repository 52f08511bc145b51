/** People, invitations, the mail outbox and the audit trail. */
import { z } from 'zod';
import { pageOf, pageQueryShape, searchShape } from './paging.ts';
import { MAX_PASSWORD_BYTES, roleSchema } from './session.ts';

const MAX_ROSTER_ROWS = 500;
export const MIN_PASSWORD_LENGTH = 12;

export const personStateSchema = z.enum(['invited', 'active', 'deactivated']);
export type PersonState = z.infer<typeof personStateSchema>;

/** A person as the administrator sees them. */
export const personSchema = z.object({
  id: z.uuid(),
  email: z.string(),
  displayName: z.string(),
  fullName: z.string(),
  roles: z.array(roleSchema),
  cohorts: z.array(z.string()),
  state: personStateSchema,
  /** End of the open invitation, ISO 8601; null without one. */
  invitationEndsAt: z.string().nullable(),
  /** Last use of any session, ISO 8601; null when never. */
  lastSeenAt: z.string().nullable(),
});
export type Person = z.infer<typeof personSchema>;

export const peopleQuerySchema = z.strictObject({
  ...pageQueryShape,
  ...searchShape,
  role: roleSchema.optional(),
  state: personStateSchema.optional(),
});
export type PeopleQuery = z.infer<typeof peopleQuerySchema>;
export const peoplePageSchema = pageOf(personSchema);

/** One line of a roster as it was read from the file; judged on the server. */
export const rosterRowSchema = z.strictObject({
  /** Line in the file, the heading being line 1. */
  line: z.number().int().min(1),
  name: z.string().max(400),
  email: z.string().max(400),
  /** Names of roles separated by spaces, commas or semicolons; empty means trainee. */
  roles: z.string().max(200),
  /** Name of a cohort, made when there is none; empty for none. */
  cohort: z.string().max(200),
});
export type RosterRow = z.infer<typeof rosterRowSchema>;
export const rosterSchema = z.strictObject({
  rows: z.array(rosterRowSchema).min(1, 'has no rows').max(MAX_ROSTER_ROWS, `has more than ${MAX_ROSTER_ROWS} rows`),
  /** False: only judge. True: invite the good rows and leave the others out. */
  invite: z.boolean(),
});
export type Roster = z.infer<typeof rosterSchema>;

export const rosterVerdictSchema = z.object({
  line: z.number().int(),
  /** `good` will be or was invited; `here` is a person already; `wrong` cannot be invited. */
  verdict: z.enum(['good', 'here', 'wrong']),
  /** What is wrong and the remedy, or what is known; empty for good. */
  words: z.string(),
});
export type RosterVerdict = z.infer<typeof rosterVerdictSchema>;
export const rosterAnswerSchema = z.object({
  rows: z.array(rosterVerdictSchema),
  invited: z.number().int().min(0),
});
export type RosterAnswer = z.infer<typeof rosterAnswerSchema>;

export const rolesBodySchema = z.strictObject({ roles: z.array(roleSchema).min(1).max(4) });
export type RolesBody = z.infer<typeof rolesBodySchema>;

const linkTokenSchema = z.string().min(20).max(100);
export const linkBodySchema = z.strictObject({ token: linkTokenSchema });
/** What the link from a message is for. */
export const linkSchema = z.object({
  kind: z.enum(['invitation', 'reset', 'address']),
  displayName: z.string(),
  /** The address one signs in with; for a change of address, the new one. */
  email: z.string(),
  organisation: z.string(),
});
export type Link = z.infer<typeof linkSchema>;

/** Bytes of `text` in UTF-8. */
function utf8Length(text: string): number {
  let bytes = 0;
  for (const character of text) {
    const code = character.codePointAt(0) ?? 0;
    bytes += code < 0x80 ? 1 : code < 0x800 ? 2 : code < 0x10000 ? 3 : 4;
  }
  return bytes;
}

/** A new password: long rather than tangled. Bytes are counted because the hash reads no more. */
export const newPasswordSchema = z
  .string()
  .min(MIN_PASSWORD_LENGTH, `has at least ${MIN_PASSWORD_LENGTH} characters`)
  .refine((text) => utf8Length(text) <= MAX_PASSWORD_BYTES, `has at most ${MAX_PASSWORD_BYTES} bytes`);
export const takeLinkSchema = z.strictObject({ token: linkTokenSchema, password: newPasswordSchema });
export type TakeLink = z.infer<typeof takeLinkSchema>;
export const askResetSchema = z.strictObject({ email: z.string().trim().min(1).max(254) });
export const changePasswordSchema = z.strictObject({
  current: z.string().min(1).max(MAX_PASSWORD_BYTES),
  password: newPasswordSchema,
});
export type ChangePassword = z.infer<typeof changePasswordSchema>;

export const mailStateSchema = z.enum(['waiting', 'sent', 'refused']);
export type MailState = z.infer<typeof mailStateSchema>;
export const outboxQuerySchema = z.strictObject({
  ...pageQueryShape,
  ...searchShape,
  state: mailStateSchema.optional(),
});
export type OutboxQuery = z.infer<typeof outboxQuerySchema>;
/** A message of the outbox. Secrets in links are not shown. */
export const outboxMailSchema = z.object({
  id: z.uuid(),
  email: z.string(),
  subject: z.string(),
  state: mailStateSchema,
  tries: z.number().int().min(0),
  /** ISO 8601. */
  createdAt: z.string(),
  nextTryAt: z.string().nullable(),
  sentAt: z.string().nullable(),
  /** Answer of the mail server to the last try; null when none failed. */
  lastError: z.string().nullable(),
});
export type OutboxMail = z.infer<typeof outboxMailSchema>;
export const outboxPageSchema = pageOf(outboxMailSchema).extend({
  /** Where mail goes: `host:port` of the configured server, or null for the local sink. */
  server: z.string().nullable(),
  /** Folder of the local sink on the server's machine, when mail goes there. */
  sinkFolder: z.string().nullable(),
});
export type OutboxPage = z.infer<typeof outboxPageSchema>;

export const auditQuerySchema = z.strictObject({
  ...pageQueryShape,
  ...searchShape,
  /** Kind of the thing: session, person, airframe, scenario … */
  kind: z.string().max(40).optional(),
  /** First and last day, UTC, both included. */
  from: z.iso.date().optional(),
  to: z.iso.date().optional(),
});
export type AuditQuery = z.infer<typeof auditQuerySchema>;
export const auditEntrySchema = z.object({
  id: z.string(),
  /** ISO 8601. */
  at: z.string(),
  /** Name of the person; null for what the program did by itself. */
  actor: z.string().nullable(),
  deed: z.string(),
  kind: z.string(),
  subject: z.string().nullable(),
  detail: z.record(z.string(), z.unknown()),
  address: z.string().nullable(),
  /** Digest that joins the entry to the one sealed before it, hexadecimal; null until it is sealed, within a minute. */
  seal: z.string().nullable(),
});
export type AuditEntry = z.infer<typeof auditEntrySchema>;
export const auditPageSchema = pageOf(auditEntrySchema).extend({ kinds: z.array(z.string()) });
export type AuditPage = z.infer<typeof auditPageSchema>;
/** Outcome of recomputing the chain. */
export const auditCheckSchema = z.object({
  sealed: z.number().int().min(0),
  waiting: z.number().int().min(0),
  /** Digest of the newest seal, hexadecimal: kept elsewhere, it shows later that entries were cut off with their seals. */
  lastSeal: z.string().nullable(),
  /** Id of the first entry whose seal does not fit, and what is wrong; null when the chain is whole. */
  firstBreak: z.object({ id: z.string(), words: z.string() }).nullable(),
});
export type AuditCheck = z.infer<typeof auditCheckSchema>;
