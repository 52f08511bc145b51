import { z } from 'zod';

/** Answer of `GET /api/health`; no sign-in needed. */
export const healthSchema = z.object({
  ok: z.boolean(),
  version: z.string(),
  database: z.enum(['ready', 'unreachable']),
});
export type Health = z.infer<typeof healthSchema>;
