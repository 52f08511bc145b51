import { DEG, G0 } from '../units/constants.ts';
import {
  derivativesBodyToStability,
  inOwnConventions,
  nonDimensionalFrom,
  OWN_CONVENTIONS,
  unprimedFromPrimed,
  US_TO_SI,
} from './conversions.ts';
import type { DerivativeConventions, LateralDerivatives } from './conversions.ts';
import { ModelError } from './errors.ts';
import { inertiasBodyToStability, inertiasStabilityToBody } from './inertia.ts';
import type { LateralInertias } from './inertia.ts';

/** One published or measured condition in its own units, axes and form. */
export interface ForeignSet {
  /** SI: kg, m, m/s, kg/m³, kg·m². US: lb (weight), ft, ft/s, slug/ft³, slug·ft². */
  units: 'SI' | 'US';
  /** Axes of the derivatives and of the inertias; body axes need `alphaDeg`. */
  axes: 'stability' | 'body';
  inertiaAxes: 'stability' | 'body';
  form: 'non-dimensional' | 'dimensional' | 'dimensional-primed';
  conventions?: Partial<DerivativeConventions>;
  /** Mass in kg, or weight in lb. */
  mass: number;
  wingArea: number;
  wingSpan: number;
  speed: number;
  density: number;
  Ixx: number;
  Izz: number;
  Ixz?: number;
  Iyy?: number;
  alphaDeg?: number;
  /** Lift coefficient of the row; default that of level flight. */
  CL?: number;
  derivatives: LateralDerivatives;
}

export interface ImportedSet {
  /** Members of the airframe format, SI. */
  wingArea_m2: number;
  wingSpan_m: number;
  mass: {
    mass_kg: number;
    Ixx_kgm2: number;
    Iyy_kgm2?: number;
    Izz_kgm2: number;
    Ixz_kgm2: number;
    axes: 'stability' | 'body';
  };
  row: LateralDerivatives & { CL: number; alpha_deg?: number };
}

/**
 * A foreign set as members of the airframe format: SI, non-dimensional, stability axes, own signs.
 *
 * Order: units, conventions, primed to unprimed, non-dimensional, body to stability axes. Inertias given in body axes stay
 * in body axes with the row's angle of attack, so that they are turned for each condition.
 *
 * @param set  The set with its units, axes and form.
 * @returns    Wing, mass and one derivative row of the airframe format.
 * @throws {ModelError} bad-argument when body axes come without an angle of attack, or a size is not above 0.
 * @sign       As this folder's README.
 * @source     Flight model, airframe data; each step in conversions.ts.
 */
export function importLateralSet(set: ForeignSet): ImportedSet {
  const us = set.units === 'US';
  const needsAlpha = set.axes === 'body' || set.inertiaAxes === 'body';
  if (needsAlpha && set.alphaDeg === undefined) {
    throw new ModelError('bad-argument', 'body axes need the angle of attack of the condition', 'alphaDeg');
  }
  for (const name of ['mass', 'wingArea', 'wingSpan', 'speed', 'density', 'Ixx', 'Izz'] as const) {
    if (!(set[name] > 0)) throw new ModelError('bad-argument', `${name} is ${set[name]}; it must be above 0`, name);
  }
  const alphaRad = (set.alphaDeg ?? 0) * DEG;
  const inertia = us ? US_TO_SI.slugFt2 : 1;
  const given: LateralInertias = { Ixx: set.Ixx * inertia, Izz: set.Izz * inertia, Ixz: (set.Ixz ?? 0) * inertia };
  const condition = {
    massKg: set.mass * (us ? US_TO_SI.lb : 1),
    wingAreaM2: set.wingArea * (us ? US_TO_SI.ft2 : 1),
    spanM: set.wingSpan * (us ? US_TO_SI.ft : 1),
    tasMps: set.speed * (us ? US_TO_SI.ftPerS : 1),
    densityKgM3: set.density * (us ? US_TO_SI.slugPerFt3 : 1),
    inertias: inertiasAbout(given, set, alphaRad),
  };
  const conventions = { ...OWN_CONVENTIONS, ...set.conventions };
  let derivatives = inOwnConventions(
    set.derivatives,
    set.form === 'non-dimensional' ? conventions : { ...conventions, rates: 'b/2V' },
  );
  if (set.form !== 'non-dimensional') {
    if (us) derivatives = withSideForce(derivatives, US_TO_SI.ft);
    if (set.form === 'dimensional-primed') derivatives = unprimedFromPrimed(derivatives, condition.inertias);
    derivatives = nonDimensionalFrom(derivatives, condition);
  }
  if (set.axes === 'body') derivatives = derivativesBodyToStability(derivatives, alphaRad);
  const qS = 0.5 * condition.densityKgM3 * condition.tasMps * condition.tasMps * condition.wingAreaM2;
  return {
    wingArea_m2: condition.wingAreaM2,
    wingSpan_m: condition.spanM,
    mass: {
      mass_kg: condition.massKg,
      Ixx_kgm2: given.Ixx,
      Izz_kgm2: given.Izz,
      Ixz_kgm2: given.Ixz,
      axes: set.inertiaAxes,
      ...(set.Iyy === undefined ? {} : { Iyy_kgm2: set.Iyy * inertia }),
    },
    row: {
      CL: set.CL ?? (condition.massKg * G0) / qS,
      ...derivatives,
      ...(set.alphaDeg === undefined ? {} : { alpha_deg: set.alphaDeg }),
    },
  };
}

/** The inertias about the axes of the derivatives, by which dimensional ones were divided. */
function inertiasAbout(given: LateralInertias, set: ForeignSet, alphaRad: number): LateralInertias {
  if (set.axes === set.inertiaAxes) return given;
  return set.axes === 'stability' ? inertiasBodyToStability(given, alphaRad) : inertiasStabilityToBody(given, alphaRad);
}

/** Dimensional side-force members are accelerations: ft/s² to m/s². */
function withSideForce(d: LateralDerivatives, factor: number): LateralDerivatives {
  return {
    ...d,
    CY_beta: d.CY_beta * factor,
    CY_p: d.CY_p * factor,
    CY_r: d.CY_r * factor,
    CY_da: d.CY_da * factor,
    CY_dr: d.CY_dr * factor,
  };
}
