/** Copies of an observation, for drawing between ticks. */
import type { Observation } from '#shared/model/plant-types.ts';

type ArrayKey = { [K in keyof Observation]: Observation[K] extends ArrayLike<number> ? K : never }[keyof Observation];

const ARRAYS: readonly ArrayKey[] = ['levers', 'thrustN', 'thrustAvailableN', 'windmillDragN', 'engineState'];

/** A copy that shares nothing with the original. */
export function cloneObservation(from: Observation): Observation {
  const out: Observation = { ...from, yawParts: { ...from.yawParts }, rollParts: { ...from.rollParts } };
  out.levers = from.levers.slice();
  out.thrustN = from.thrustN.slice();
  out.thrustAvailableN = from.thrustAvailableN.slice();
  out.windmillDragN = from.windmillDragN.slice();
  out.engineState = from.engineState.slice();
  return out;
}

/** Overwrites `out` with `from` without new objects. */
export function copyObservationInto(out: Observation, from: Observation): void {
  const { yawParts, rollParts } = out;
  const arrays = ARRAYS.map((key) => out[key]);
  Object.assign(out, from);
  out.yawParts = Object.assign(yawParts, from.yawParts);
  out.rollParts = Object.assign(rollParts, from.rollParts);
  ARRAYS.forEach((key, i) => {
    const own = arrays[i];
    own.set(from[key]);
    Object.assign(out, { [key]: own });
  });
}

/** What moves the picture between two ticks; everything else shows the sample. */
const POSE = ['northM', 'eastM', 'heightM', 'heightAboveRunwayM', 'phiRad', 'thetaRad', 'psiRad', 'betaRad'] as const;
export type Pose = Record<(typeof POSE)[number], number>;

export const createPose = (): Pose => ({
  northM: 0,
  eastM: 0,
  heightM: 0,
  heightAboveRunwayM: 0,
  phiRad: 0,
  thetaRad: 0,
  psiRad: 0,
  betaRad: 0,
});

export function copyPoseInto(out: Pose, from: Pose): void {
  for (const key of POSE) out[key] = from[key];
}

/** Pose at a share of the way from one tick to the next. Instruments never use this: they show the sample. */
export function blendPoseInto(out: Pose, from: Pose, to: Pose, share: number): void {
  for (const key of POSE) out[key] = from[key] + (to[key] - from[key]) * share;
}
