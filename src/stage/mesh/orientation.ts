/**
 * Attitude and directions of an observation in the scene: X east, Y up, Z south.
 * Signs of the model: psi clockwise from north, theta path pitch up, phi right wing down, alpha nose above the path.
 */
import { Euler, Quaternion, Vector3 } from 'three';
import type { Observation } from '#shared/model/plant-types.ts';

/** What fixes where an aeroplane is and how it stands. */
export type Pose = Pick<
  Observation,
  | 'psiRad'
  | 'thetaRad'
  | 'phiRad'
  | 'betaRad'
  | 'alphaRad'
  | 'northM'
  | 'eastM'
  | 'heightAboveRunwayM'
  | 'groundSpeedMps'
  | 'trackRad'
  | 'verticalSpeedMps'
  | 'tasMps'
>;

const X_AXIS = new Vector3(1, 0, 0);
const euler = new Euler(0, 0, 0, 'YXZ');
const pitchUp = new Quaternion();

/** Place of the mass centre in the scene; m. */
export function placeInto(out: Vector3, pose: Pose): Vector3 {
  return out.set(pose.eastM, pose.heightAboveRunwayM, -pose.northM);
}

/** Turn of the stability axes: heading, path pitch, bank. */
export function stabilityTurnInto(out: Quaternion, pose: Pose): Quaternion {
  euler.set(pose.thetaRad, -pose.psiRad, -pose.phiRad);
  return out.setFromEuler(euler);
}

/** Turn of the fuselage: the stability axes and the angle of attack, where the data has one. */
export function bodyTurnInto(out: Quaternion, pose: Pose): Quaternion {
  stabilityTurnInto(out, pose);
  if (Number.isFinite(pose.alphaRad)) out.multiply(pitchUp.setFromAxisAngle(X_AXIS, pose.alphaRad));
  return out;
}

/** Unit direction of the flight path through the air. */
export function airDirectionInto(out: Vector3, pose: Pose, turn: Quaternion): Vector3 {
  // stability axes (cos β, sin β, 0) are (sin β, 0, −cos β) in the scene's local axes
  return out.set(Math.sin(pose.betaRad), 0, -Math.cos(pose.betaRad)).applyQuaternion(turn);
}

/** Unit direction over the ground; falls back to the air direction when the aeroplane stands still. */
export function groundDirectionInto(out: Vector3, pose: Pose, air: Vector3): Vector3 {
  const speed = Math.hypot(pose.groundSpeedMps, pose.verticalSpeedMps);
  if (!(speed > 0.5)) return out.copy(air);
  const along = pose.groundSpeedMps / speed;
  return out.set(Math.sin(pose.trackRad) * along, pose.verticalSpeedMps / speed, -Math.cos(pose.trackRad) * along);
}

/** Azimuth of a direction, clockwise from north; rad. */
export function azimuthOf(direction: Vector3): number {
  return Math.atan2(direction.x, -direction.z);
}
