import { cos, sin } from '../numerics/elementary.ts';

/** Moments of inertia about roll and yaw axes with their product; kg·m². */
export interface LateralInertias {
  Ixx: number;
  Izz: number;
  Ixz: number;
}

/**
 * Inertias about stability axes from those about body axes.
 *
 * @param body      Ixx, Izz, Ixz about body axes; kg·m².
 * @param alphaRad  Angle from the stability x axis up to the body x axis (trim angle of attack); rad.
 * @returns         Ixx, Izz, Ixz about stability axes; kg·m²; Iyy does not change.
 * @throws          Nothing.
 * @sign            Ixz = ∫xz dm; x forward, z down.
 * @source          Rotation of the inertia tensor; the project's reference table, conventions.
 */
export function inertiasBodyToStability(body: LateralInertias, alphaRad: number): LateralInertias {
  const c = cos(alphaRad);
  const s = sin(alphaRad);
  return {
    Ixx: body.Ixx * c * c + body.Izz * s * s - 2 * body.Ixz * s * c,
    Izz: body.Ixx * s * s + body.Izz * c * c + 2 * body.Ixz * s * c,
    Ixz: (body.Ixx - body.Izz) * s * c + body.Ixz * (c * c - s * s),
  };
}

/**
 * Inertias about body axes from those about stability axes.
 *
 * @param stability  Ixx, Izz, Ixz about stability axes; kg·m².
 * @param alphaRad   Trim angle of attack; rad.
 * @returns          Ixx, Izz, Ixz about body axes; kg·m².
 * @throws           Nothing.
 * @sign             As `inertiasBodyToStability`.
 * @source           The inverse rotation.
 */
export function inertiasStabilityToBody(stability: LateralInertias, alphaRad: number): LateralInertias {
  return inertiasBodyToStability(stability, -alphaRad);
}
