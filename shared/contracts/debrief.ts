/** Debrief of an attempt: remarks pinned to moments, sign-off and counter-signature. Nothing is ever overwritten. */
import { z } from 'zod';
import { pageOf, pageQueryShape, slugSchema } from './paging.ts';

const personSchema = z.object({ id: z.uuid(), displayName: z.string() });

export const newRemarkSchema = z.strictObject({
  /** Tick of the run that the remark is pinned to. */
  tick: z.number().int().min(0).max(10_000_000),
  text: z
    .string()
    .trim()
    .min(1, 'A remark has at least one character.')
    .max(2000, 'A remark has at most 2,000 characters.'),
});
export type NewRemark = z.input<typeof newRemarkSchema>;

export const remarkSchema = z.object({
  id: z.uuid(),
  tick: z.number().int().min(0),
  text: z.string(),
  author: personSchema,
  at: z.iso.datetime(),
  /** A withdrawn remark keeps its place and time and loses its text. */
  withdrawnAt: z.iso.datetime().nullable(),
  mayWithdraw: z.boolean(),
});
export type Remark = z.infer<typeof remarkSchema>;

export const SIGN_OFF_KINDS = ['sign-off', 'counter-signature'] as const;
export const SIGN_OFF_VERDICTS = ['met', 'not-met'] as const;

export const newSignOffSchema = z.strictObject({
  kind: z.enum(SIGN_OFF_KINDS),
  verdict: z.enum(SIGN_OFF_VERDICTS),
  /** Needed when it differs from the computed result or corrects an earlier entry. */
  note: z.string().trim().max(2000, 'A note has at most 2,000 characters.').default(''),
  /** Signing attests who held the controls. */
  heldControls: z.literal(true, 'Confirm that the trainee held the controls.'),
});
export type NewSignOff = z.input<typeof newSignOffSchema>;

export const signOffSchema = z.object({
  id: z.uuid(),
  kind: z.enum(SIGN_OFF_KINDS),
  verdict: z.enum(SIGN_OFF_VERDICTS),
  note: z.string(),
  signer: personSchema,
  at: z.iso.datetime(),
  /** False for an entry that a later one of its kind corrected. */
  standing: z.boolean(),
});
export type SignOff = z.infer<typeof signOffSchema>;

export const debriefSchema = z.object({
  remarks: z.array(remarkSchema),
  signOffs: z.array(signOffSchema),
  mayRemark: z.boolean(),
  maySignOff: z.boolean(),
  mayCounterSign: z.boolean(),
  /** Why signing is not open, in words; empty when it is. */
  why: z.string(),
});
export type Debrief = z.infer<typeof debriefSchema>;

/** Remarks that a person received, newest first. */
export const receivedRemarksQuerySchema = z.strictObject({ ...pageQueryShape });
export const receivedRemarkSchema = z.object({
  id: z.uuid(),
  attemptId: z.uuid(),
  scenarioSlug: slugSchema,
  scenarioTitle: z.string(),
  tick: z.number().int().min(0),
  text: z.string(),
  author: z.string(),
  at: z.iso.datetime(),
});
export type ReceivedRemark = z.infer<typeof receivedRemarkSchema>;
export const receivedRemarkPageSchema = pageOf(receivedRemarkSchema);
