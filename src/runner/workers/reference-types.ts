import type { Airframe } from '#shared/model/airframe-schema.ts';
import type { Scenario } from '#shared/scenario/scenario-schema.ts';
import type { DrawnValues, EndReason } from '#shared/scenario/run-types.ts';
import type { ChannelId } from '../channels.ts';

export interface ReferenceQuestion {
  id: number;
  scenario: Scenario;
  airframe: Airframe;
  seed: number;
  drawn: DrawnValues;
  /** Seconds after the first event until the reference pilot wakes. */
  delayS: number;
}

/** What the ghost needs of each sample, and what the traces need, on the trace grid (30 a second). */
export const GHOST_MEMBERS = [
  'northM',
  'eastM',
  'heightM',
  'heightAboveRunwayM',
  'phiRad',
  'thetaRad',
  'psiRad',
  'betaRad',
  'tasMps',
  'aileronRad',
  'rudderRad',
  'alphaRad',
  'pitchAttitudeRad',
] as const;
export type GhostMember = (typeof GHOST_MEMBERS)[number];

export interface ReferenceRun {
  samples: number;
  durationS: number;
  ended: EndReason | null;
  passed: boolean;
  columns: Record<ChannelId, Float32Array>;
  ghost: Record<GhostMember, Float64Array>;
}

export type ReferenceAnswer = { id: number; ok: true; run: ReferenceRun } | { id: number; ok: false; message: string };
