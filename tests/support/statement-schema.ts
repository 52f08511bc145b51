/**
 * Rules of a statement, written from the published specification, independently of the code that makes statements.
 *
 * Source: Experience API specification 1.0.3, part two "Experience API Data", sections 2.2 (formatting: no null, no
 * unknown property, IRIs, language maps), 2.3 (life cycle: voiding), 2.4.1 (id), 2.4.2 (actor, account), 2.4.3 (verb),
 * 2.4.4 (object), 2.4.5 (result, score), 2.4.6 (context), 2.4.7 (timestamp), 4.1 to 4.6 (data types); read from memory
 * of the text, section numbers to the first two levels.
 */
import { z } from 'zod';

/** RFC 4122 variant, any version (4.1.1, "standard string form"). */
const uuid = z.string().regex(/^[0-9a-f]{8}-[0-9a-f]{4}-[1-8][0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/i);
/** An IRI has a scheme and no white space. */
const iri = z.string().regex(/^[a-z][a-z0-9+.-]*:[^\s<>"{}|\\^`]+$/i);
const languageTag = z.string().regex(/^[A-Za-z]{2,8}(?:-[A-Za-z0-9]{1,8})*$/);
const languageMap = z.record(languageTag, z.string());
/** Without an own rule for values, but never null: 2.2 forbids null except inside extensions. */
const extensions = z.record(iri, z.unknown());
/** ISO 8601 with a zone; "-00:00" is not allowed (4.5). */
const timestamp = z
  .string()
  .regex(/^\d{4}-\d{2}-\d{2}T\d{2}:\d{2}:\d{2}(?:\.\d+)?(?:Z|[+-]\d{2}:\d{2})$/)
  .refine((text) => !text.endsWith('-00:00') && !Number.isNaN(Date.parse(text)));
const duration = z
  .string()
  .regex(/^P(?!$)(?:\d+(?:\.\d+)?W|(?:\d+Y)?(?:\d+M)?(?:\d+D)?(?:T(?=\d)(?:\d+H)?(?:\d+M)?(?:\d+(?:\.\d+)?S)?)?)$/);

const account = z.strictObject({ homePage: iri, name: z.string().min(1) });
/** Exactly one inverse functional identifier (2.4.2.3). */
const agent = z
  .strictObject({
    objectType: z.literal('Agent').optional(),
    name: z.string().optional(),
    mbox: z
      .string()
      .regex(/^mailto:\S+@\S+$/)
      .optional(),
    mbox_sha1sum: z
      .string()
      .regex(/^[0-9a-f]{40}$/i)
      .optional(),
    openid: iri.optional(),
    account: account.optional(),
  })
  .refine(
    (who) => [who.mbox, who.mbox_sha1sum, who.openid, who.account].filter((id) => id !== undefined).length === 1,
    {
      error: 'An agent has exactly one identifier.',
    },
  );
const verb = z.strictObject({ id: iri, display: languageMap.optional() });
const activity = z.strictObject({
  objectType: z.literal('Activity').optional(),
  id: iri,
  definition: z
    .strictObject({
      name: languageMap.optional(),
      description: languageMap.optional(),
      type: iri.optional(),
      moreInfo: iri.optional(),
      extensions: extensions.optional(),
    })
    .optional(),
});
const reference = z.strictObject({ objectType: z.literal('StatementRef'), id: uuid });
const score = z
  .strictObject({
    scaled: z.number().min(-1).max(1).optional(),
    raw: z.number().optional(),
    min: z.number().optional(),
    max: z.number().optional(),
  })
  .refine(
    ({ raw, min, max }) =>
      raw === undefined || ((min === undefined || raw >= min) && (max === undefined || raw <= max)),
  )
  .refine(({ min, max }) => min === undefined || max === undefined || min < max);
const result = z.strictObject({
  score: score.optional(),
  success: z.boolean().optional(),
  completion: z.boolean().optional(),
  response: z.string().optional(),
  duration: duration.optional(),
  extensions: extensions.optional(),
});
const context = z.strictObject({
  registration: uuid.optional(),
  instructor: agent.optional(),
  team: z.unknown().optional(),
  contextActivities: z.unknown().optional(),
  /** Only where the object is an activity. */
  revision: z.string().optional(),
  platform: z.string().optional(),
  language: languageTag.optional(),
  statement: reference.optional(),
  extensions: extensions.optional(),
});

const VOIDED = 'http://adlnet.gov/expapi/verbs/voided';

/** What an endpoint must accept: a statement that breaks any of these is refused by the specification. */
export const publishedStatementSchema = z
  .strictObject({
    id: uuid,
    actor: agent,
    verb,
    object: z.union([activity, reference]),
    result: result.optional(),
    context: context.optional(),
    timestamp: timestamp.optional(),
    version: z
      .string()
      .regex(/^1\.0(?:\.\d+)?$/)
      .optional(),
  })
  .refine(
    ({ object, context: c }) =>
      !('objectType' in object && object.objectType === 'StatementRef') ||
      (c?.platform === undefined && c?.revision === undefined),
    {
      error: 'Platform and revision stand only beside an activity.',
    },
  )
  .refine(
    ({ verb: v, object }) => v.id !== VOIDED || ('objectType' in object && object.objectType === 'StatementRef'),
    {
      error: 'Voiding refers to a statement.',
    },
  )
  .refine((statement) => !hasNull({ ...statement, result: { ...statement.result, extensions: undefined } }), {
    error: 'No value outside extensions is null.',
  });

function hasNull(value: unknown): boolean {
  if (value === null) return true;
  return typeof value === 'object' && Object.values(value).some(hasNull);
}
