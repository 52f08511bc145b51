/** The first set-up of a server that holds no organisation: it can be done once. */
import { z } from 'zod';
import { displayNameSchema } from './account.ts';
import { newPasswordSchema } from './administration.ts';

/** Whether the first set-up is still to be done, and whether this reader needs the code printed at start. */
export const setUpStateSchema = z.object({ open: z.boolean(), codeNeeded: z.boolean() });
export type SetUpState = z.infer<typeof setUpStateSchema>;

export const setUpBodySchema = z.strictObject({
  /** Printed where the server was started; not needed on the server's own machine. */
  code: z.string().trim().max(40).default(''),
  organisation: z
    .string()
    .trim()
    .min(1, 'is empty; name your organisation')
    .max(120, 'has more than 120 characters; shorten it'),
  units: z.enum(['aviation', 'si']),
  /** True: the shipped airframes and scenarios, which are invented and say so, are put into the new organisation. */
  library: z.boolean(),
  name: displayNameSchema,
  email: z
    .string()
    .max(254, 'has more than 254 characters')
    .transform((text) => text.normalize('NFKC').trim())
    .pipe(z.email('is not an e-mail address; write it as name@school.example')),
  password: newPasswordSchema,
});
export type SetUpBody = z.input<typeof setUpBodySchema>;
