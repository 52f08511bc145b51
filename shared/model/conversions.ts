import { cos, sin } from '../numerics/elementary.ts';
import { DEG, FT, LB, LBF, SLUG } from '../units/constants.ts';
import type { LateralInertias } from './inertia.ts';

/** The fifteen lateral-directional derivatives under the airframe format's names, whatever their form and axes. */
export interface LateralDerivatives {
  CY_beta: number;
  CY_p: number;
  CY_r: number;
  CY_da: number;
  CY_dr: number;
  Cl_beta: number;
  Cl_p: number;
  Cl_r: number;
  Cl_da: number;
  Cl_dr: number;
  Cn_beta: number;
  Cn_p: number;
  Cn_r: number;
  Cn_da: number;
  Cn_dr: number;
}

/** Members that belong to one input, and the rolling and yawing pair of each. */
const INPUTS = ['beta', 'p', 'r', 'da', 'dr'] as const;

/** Factors from US customary units to SI: multiply to get m, m², m/s, kg, kg·m², kg/m³, N, W. */
export const US_TO_SI = {
  ft: FT,
  ft2: FT * FT,
  ftPerS: FT,
  slug: SLUG,
  lb: LB,
  slugFt2: SLUG * FT * FT,
  slugPerFt3: SLUG / (FT * FT * FT),
  lbf: LBF,
  /** Mechanical horsepower, 550 ft·lbf/s. */
  hp: 550 * FT * LBF,
} as const;

/**
 * Derivatives about stability axes from those about body axes.
 *
 * Rolling and yawing moments and rates are turned about the y axis; forces along y, β and surfaces stay. The forms must be
 * alike for roll and yaw: non-dimensional with the same span, or moments themselves; not divided by inertias.
 *
 * @param body      Derivatives about body axes; per rad, rates made non-dimensional by b/(2V).
 * @param alphaRad  Angle of attack of the condition; rad.
 * @returns         Derivatives about stability axes; same units.
 * @throws          Nothing.
 * @sign            Stability x axis along the velocity, below the body x axis at positive angle of attack.
 * @source          B. Etkin, L. Reid, Dynamics of Flight, 3rd ed., appendix B.12 (rotation of axes); derived.
 */
export function derivativesBodyToStability(body: LateralDerivatives, alphaRad: number): LateralDerivatives {
  const c = cos(alphaRad);
  const s = sin(alphaRad);
  const out = { ...body };
  for (const input of INPUTS) {
    out[`Cl_${input}`] = body[`Cl_${input}`] * c + body[`Cn_${input}`] * s;
    out[`Cn_${input}`] = body[`Cn_${input}`] * c - body[`Cl_${input}`] * s;
  }
  for (const family of ['CY', 'Cl', 'Cn'] as const) {
    const p = out[`${family}_p`];
    const r = out[`${family}_r`];
    out[`${family}_p`] = p * c + r * s;
    out[`${family}_r`] = r * c - p * s;
  }
  return out;
}

/**
 * Derivatives about body axes from those about stability axes.
 *
 * @param stability  Derivatives about stability axes; per rad.
 * @param alphaRad   Angle of attack of the condition; rad.
 * @returns          Derivatives about body axes; same units.
 * @throws           Nothing.
 * @sign             As `derivativesBodyToStability`.
 * @source           The inverse rotation.
 */
export function derivativesStabilityToBody(stability: LateralDerivatives, alphaRad: number): LateralDerivatives {
  return derivativesBodyToStability(stability, -alphaRad);
}

/**
 * Dimensional derivatives without the product of inertia's share from primed ones.
 *
 * L = L' − (Ixz/Ixx) N', N = N' − (Ixz/Izz) L', for each of β, p, r, δa, δr; side-force members stay.
 *
 * @param primed    Primed derivatives; 1/s² per rad, 1/s per rad/s.
 * @param inertias  About the axes of the derivatives; kg·m² or any one unit.
 * @returns         Unprimed derivatives; same units.
 * @throws          Nothing.
 * @sign            Ixz = ∫xz dm.
 * @source          D. McRuer, I. Ashkenas, D. Graham, Aircraft Dynamics and Automatic Control, section 6.2; inverted.
 */
export function unprimedFromPrimed(primed: LateralDerivatives, inertias: LateralInertias): LateralDerivatives {
  const { Ixx, Izz, Ixz } = inertias;
  const out = { ...primed };
  for (const input of INPUTS) {
    out[`Cl_${input}`] = primed[`Cl_${input}`] - (Ixz / Ixx) * primed[`Cn_${input}`];
    out[`Cn_${input}`] = primed[`Cn_${input}`] - (Ixz / Izz) * primed[`Cl_${input}`];
  }
  return out;
}

/**
 * Primed derivatives from unprimed dimensional ones: L' = (L + (Ixz/Ixx) N)/(1 − Ixz²/(Ixx Izz)), N' likewise.
 *
 * @param unprimed  Dimensional derivatives; 1/s² per rad, 1/s per rad/s.
 * @param inertias  About the axes of the derivatives; kg·m² or any one unit.
 * @returns         Primed derivatives; same units.
 * @throws          Nothing.
 * @sign            Ixz = ∫xz dm.
 * @source          D. McRuer, I. Ashkenas, D. Graham, Aircraft Dynamics and Automatic Control, section 6.2.
 */
export function primedFromUnprimed(unprimed: LateralDerivatives, inertias: LateralInertias): LateralDerivatives {
  const { Ixx, Izz, Ixz } = inertias;
  const scale = 1 / (1 - (Ixz * Ixz) / (Ixx * Izz));
  const out = { ...unprimed };
  for (const input of INPUTS) {
    out[`Cl_${input}`] = scale * (unprimed[`Cl_${input}`] + (Ixz / Ixx) * unprimed[`Cn_${input}`]);
    out[`Cn_${input}`] = scale * (unprimed[`Cn_${input}`] + (Ixz / Izz) * unprimed[`Cl_${input}`]);
  }
  return out;
}

/** What dimensional derivatives were divided by. One consistent unit system, SI or ft-slug. */
export interface DimensionalCondition {
  massKg: number;
  wingAreaM2: number;
  spanM: number;
  tasMps: number;
  densityKgM3: number;
  inertias: LateralInertias;
}

/**
 * Non-dimensional derivatives from dimensional, unprimed ones.
 *
 * C = Y·m/(qS), L·Ixx/(qSb), N·Izz/(qSb); rates also times 2V/b.
 *
 * @param dimensional  Y members in m/s² per rad (m/s per rad/s), L and N members in 1/s² per rad (1/s per rad/s).
 * @param condition    Mass, wing, speed, density, inertias; one consistent unit system.
 * @returns            Derivatives per rad, rates made non-dimensional by b/(2V).
 * @throws             Nothing.
 * @sign               none
 * @source             B. Etkin, L. Reid, Dynamics of Flight, 3rd ed., table 4.5; inverted.
 */
export function nonDimensionalFrom(
  dimensional: LateralDerivatives,
  condition: DimensionalCondition,
): LateralDerivatives {
  return scaled(dimensional, condition, (value, factor) => value / factor);
}

/**
 * Dimensional, unprimed derivatives from non-dimensional ones.
 *
 * @param coefficients  Per rad, rates made non-dimensional by b/(2V).
 * @param condition     Mass, wing, speed, density, inertias; one consistent unit system.
 * @returns             Y members in m/s² per rad (m/s per rad/s), L and N members in 1/s² per rad (1/s per rad/s).
 * @throws              Nothing.
 * @sign                none
 * @source              B. Etkin, L. Reid, Dynamics of Flight, 3rd ed., table 4.5.
 */
export function dimensionalFrom(coefficients: LateralDerivatives, condition: DimensionalCondition): LateralDerivatives {
  return scaled(coefficients, condition, (value, factor) => value * factor);
}

function scaled(
  from: LateralDerivatives,
  { massKg, wingAreaM2, spanM, tasMps, densityKgM3, inertias }: DimensionalCondition,
  apply: (value: number, factor: number) => number,
): LateralDerivatives {
  const qS = 0.5 * densityKgM3 * tasMps * tasMps * wingAreaM2;
  const factors = { CY: qS / massKg, Cl: (qS * spanM) / inertias.Ixx, Cn: (qS * spanM) / inertias.Izz };
  const out = { ...from };
  for (const family of ['CY', 'Cl', 'Cn'] as const) {
    for (const input of INPUTS) {
      const rate = input === 'p' || input === 'r' ? spanM / (2 * tasMps) : 1;
      out[`${family}_${input}`] = apply(from[`${family}_${input}`], factors[family] * rate);
    }
  }
  return out;
}

/** How the numbers of a foreign set are meant. */
export interface DerivativeConventions {
  /** A positive aileron rolls … */
  aileron: 'right' | 'left';
  /** A positive rudder has its trailing edge … */
  rudder: 'left' | 'right';
  /** Derivatives with β and surfaces are per … */
  angles: 'rad' | 'degree';
  /** Rates are made non-dimensional by … */
  rates: 'b/2V' | 'b/V';
}

/** The product's own conventions. */
export const OWN_CONVENTIONS: DerivativeConventions = {
  aileron: 'right',
  rudder: 'left',
  angles: 'rad',
  rates: 'b/2V',
};

/**
 * The same derivatives in the product's conventions.
 *
 * @param given        Derivatives as their source states them.
 * @param conventions  Sign of the surfaces, unit of angles, form of rates.
 * @returns            Per rad, b/(2V), δa > 0 rolls right, δr > 0 trailing edge left.
 * @throws             Nothing.
 * @sign               As this folder's README.
 * @source             Definitions.
 */
export function inOwnConventions(given: LateralDerivatives, conventions: DerivativeConventions): LateralDerivatives {
  const perAngle = conventions.angles === 'degree' ? 1 / DEG : 1;
  const factors = {
    beta: perAngle,
    p: conventions.rates === 'b/V' ? 2 : 1,
    r: conventions.rates === 'b/V' ? 2 : 1,
    da: conventions.aileron === 'left' ? -perAngle : perAngle,
    dr: conventions.rudder === 'right' ? -perAngle : perAngle,
  };
  const out = { ...given };
  for (const family of ['CY', 'Cl', 'Cn'] as const) {
    for (const input of INPUTS) {
      const value = given[`${family}_${input}`] * factors[input];
      out[`${family}_${input}`] = value === 0 ? 0 : value;
    }
  }
  return out;
}
