import { NumericsError, requireFinite } from '../numerics/errors.ts';

/** The linear lateral model in the form that analysis works on. The model's small-disturbance matrices fit it. */
export interface LateralSystem {
  /** x' = A x with x = [β, p, r, φ]; 4×4 row-major; rad, rad/s, rad/s, rad; 1/s. */
  A: Float64Array;
  /** Input columns; length 4. */
  B: {
    /** Per rad of aileron (δa > 0 rolls right). */
    aileron: Float64Array;
    /** Per rad of rudder (δr > 0 is trailing edge left). */
    rudder: Float64Array;
    /** Per N·m of engine yawing moment. */
    yawMoment: Float64Array;
    /** Per N·m of engine rolling moment. */
    rollMoment: Float64Array;
  };
  /** True airspeed; m/s. */
  tasMps: number;
}

/** The yaw damper as the linear analysis sees it: no authority, no lag. */
export interface DamperLaw {
  /** Rudder per yaw rate; s. */
  gainS: number;
  washoutS: number;
}

/**
 * The system with the yaw damper's washout as fifth state.
 *
 * δr = gain·(r − x5) with x5' = (r − x5)/washout: positive rudder (trailing edge left) opposes a yaw to the right.
 *
 * @param A       4×4 row-major; 1/s.
 * @param rudder  Input column of the rudder; length 4.
 * @param damper  Gain and washout.
 * @returns       5×5 row-major; 1/s.
 * @throws {NumericsError} bad-argument for a washout that is not positive, non-finite-input.
 * @sign          δr > 0 yaws left (Cn_dr < 0), so a yaw to the right asks for δr > 0.
 * @source        D. McRuer, I. Ashkenas, D. Graham, Aircraft Dynamics and Automatic Control, ch. 8 (from memory).
 */
export function withYawDamper(A: ArrayLike<number>, rudder: ArrayLike<number>, damper: DamperLaw): Float64Array {
  requireFinite(A, 16, 'system matrix');
  requireFinite(rudder, 4, 'rudder column');
  if (!(damper.washoutS > 0) || !Number.isFinite(damper.gainS)) {
    throw new NumericsError('bad-argument', `a washout of ${damper.washoutS} s is not positive`);
  }
  const out = new Float64Array(25);
  for (let i = 0; i < 4; i++) {
    for (let j = 0; j < 4; j++) out[i * 5 + j] = A[i * 4 + j];
    out[i * 5 + 2] += damper.gainS * rudder[i];
    out[i * 5 + 4] = -damper.gainS * rudder[i];
  }
  out[4 * 5 + 2] = 1 / damper.washoutS;
  out[4 * 5 + 4] = -1 / damper.washoutS;
  return out;
}

export type LateralInput = 'aileron' | 'rudder' | 'side-gust' | 'roll-gust' | 'yaw-gust' | 'yaw-moment' | 'roll-moment';

/**
 * The input column of a control or of air motion.
 *
 * Gusts act through the air-relative motion: β_air = β − v_g/V, p_air = p − p_g, r_air = r − r_g; the kinematic parts of
 * the matrix (−r in β̇, φ̇ = p + …) do not feel them.
 *
 * @param system  Lateral system.
 * @param input   Which input; controls in rad, side gust in m/s (air moving right), gust rates in rad/s, moments in N·m.
 * @returns       Column of length 4.
 * @throws        Nothing.
 * @sign          A side gust is positive when the air moves to the right, gust rates when the air rolls or yaws right.
 * @source        Etkin & Reid, Dynamics of Flight, 3rd ed. 1996, section 7.10; the model's page, section 8.
 */
export function inputColumn(system: LateralSystem, input: LateralInput): Float64Array {
  const { A, B } = system;
  switch (input) {
    case 'aileron':
      return B.aileron;
    case 'rudder':
      return B.rudder;
    case 'yaw-moment':
      return B.yawMoment;
    case 'roll-moment':
      return B.rollMoment;
    case 'side-gust':
      return Float64Array.of(-A[0], -A[4], -A[8], 0).map((value) => value / system.tasMps);
    case 'roll-gust':
      return Float64Array.of(-A[1], -A[5], -A[9], 0);
    case 'yaw-gust':
      return Float64Array.of(-(A[2] + 1), -A[6], -A[10], 0);
  }
}
