/** What a person keeps of themselves, and the sessions that are open in their name. */
import { z } from 'zod';
import { meSchema, MAX_PASSWORD_BYTES, personalUnitsSchema, timeZoneSchema } from './session.ts';

/** One signed-in browser. */
export const openSessionSchema = z.object({
  id: z.uuid(),
  /** What the browser says of itself; null when it said nothing. */
  agent: z.string().nullable(),
  /** Network address it was opened from. */
  address: z.string().nullable(),
  openedAt: z.iso.datetime(),
  /** To the nearest ten minutes: a session in use is renewed that often. */
  lastUsedAt: z.iso.datetime(),
  /** The session that asks. */
  here: z.boolean(),
});
export type OpenSession = z.infer<typeof openSessionSchema>;
export const openSessionsSchema = z.array(openSessionSchema);

const BIDI_OVERRIDES = /[\u202A-\u202E\u2066-\u2069]/u;
/** A name as it is shown: any script, no control characters and nothing that turns the line around. */
export const displayNameSchema = z
  .string()
  .transform((text) => text.normalize('NFC').trim().replace(/\s+/gu, ' '))
  .pipe(
    z
      .string()
      .min(1, 'is empty; give the name as it is to be shown')
      .max(120, 'has more than 120 characters; shorten it')
      .refine((text) => !/[\p{Cc}\uFFFD]/u.test(text) && !BIDI_OVERRIDES.test(text), 'holds unreadable characters'),
  );

/** What a person changes of their own. Null: as the organisation, or as this device. */
export const profileBodySchema = z.strictObject({
  displayName: displayNameSchema,
  units: personalUnitsSchema,
  timeZone: timeZoneSchema,
});
export type ProfileBody = z.infer<typeof profileBodySchema>;
export const profileAnswerSchema = meSchema;

/** Compatibility forms (full-width letters) are folded before the address is judged. */
export const newAddressSchema = z.strictObject({
  email: z
    .string()
    .max(254, 'has more than 254 characters')
    .transform((text) => text.normalize('NFKC').trim())
    .pipe(z.email('is not an e-mail address; write it as name@school.example')),
  /** The current password, so that an unattended screen does not give the account away. */
  password: z.string().min(1, 'is missing').max(MAX_PASSWORD_BYTES),
});
export type NewAddress = z.infer<typeof newAddressSchema>;
