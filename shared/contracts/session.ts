/** Signing in and who is signed in. */
import { z } from 'zod';

export const ROLES = ['trainee', 'instructor', 'engineer', 'administrator'] as const;
export const roleSchema = z.enum(ROLES);
export type Role = z.infer<typeof roleSchema>;

const MAX_EMAIL_LENGTH = 254; // RFC 5321 path length less the angle brackets
/** bcrypt reads 72 bytes; longer passwords are refused rather than cut. */
export const MAX_PASSWORD_BYTES = 72;

export const signInBodySchema = z.strictObject({
  email: z.string().trim().min(1).max(MAX_EMAIL_LENGTH),
  password: z.string().min(1).max(MAX_PASSWORD_BYTES),
});
export type SignInBody = z.infer<typeof signInBodySchema>;

const MAX_CAUTION = 300;
export const organisationSettingsSchema = z.object({
  units: z.enum(['aviation', 'si']),
  /** The recognition time the organisation states itself; there is no default. */
  recognitionTimeS: z.number().positive().max(60).nullable(),
  guests: z.boolean(),
  /** Words of the organisation below the fixed caution; they never replace it. Empty: none. */
  caution: z.string().trim().max(MAX_CAUTION, `has more than ${MAX_CAUTION} characters`).default(''),
});
export type OrganisationSettings = z.infer<typeof organisationSettingsSchema>;

/** What an administrator sets for the whole organisation. */
export const organisationBodySchema = z.strictObject({
  name: z.string().trim().min(1).max(120),
  settings: organisationSettingsSchema,
});
export type OrganisationBody = z.infer<typeof organisationBodySchema>;

/** Units a person prefers; null: those of the organisation. */
export const personalUnitsSchema = z.enum(['aviation', 'si']).nullable();
/** A zone by its name in the time-zone database; null: that of the device. */
export const timeZoneSchema = z.string().min(1).max(64).nullable();

export const meSchema = z.object({
  person: z.object({
    id: z.uuid(),
    displayName: z.string(),
    email: z.string(),
    units: personalUnitsSchema.default(null),
    timeZone: timeZoneSchema.default(null),
  }),
  organisation: z.object({ id: z.uuid(), name: z.string(), settings: organisationSettingsSchema }),
  roles: z.array(roleSchema),
  /** Version of the program. */
  version: z.string(),
});
export type Me = z.infer<typeof meSchema>;
