/** The contributions of wing, body and fin to each derivative, from geometry, beside the draft's own totals. */
import {
  estimateBody,
  estimateWingPosition,
  estimateWingRollDamping,
} from '#shared/analysis/body-and-wing-estimates.ts';
import {
  dorsalFinStallDeg,
  estimateCrossDerivatives,
  estimateDihedralEffect,
  estimateFin,
  estimateRudder,
  finLiftSlope,
} from '#shared/analysis/geometry-estimates.ts';
import { DEG } from '#shared/units/constants.ts';

export interface EstimatorInput {
  wingAreaM2: number;
  wingSpanM: number;
  wingSweepDeg: number;
  dihedralDeg: number;
  taper: number;
  wingLiftSlope: number;
  CL: number;
  /** Angle of attack of the entry. */
  alphaDeg: number;
  finAreaM2: number;
  finSpanM: number;
  finSweepDeg: number;
  armM: number;
  heightM: number;
  fuselageRadiusM: number;
  fuselageDepthM: number;
  fuselageWidthM: number;
  fuselageLengthM: number;
  fuselageFullness: number;
  wingBelowCentreM: number;
  rudderChordRatio: number;
  rudderSpanShare: number;
  dorsalShare: number;
  plainStallDeg: number;
}

export interface Contribution {
  key: string;
  wing: number;
  body: number;
  fin: number;
  sum: number;
  /** What the draft holds; null when it holds nothing. */
  total: number | null;
}
export interface Offer {
  /** Member of the row or of the fin. */
  pointer: string;
  label: string;
  value: number;
  /** Handbook methods by name. */
  method: string;
  uncertaintyPct: number;
}
export interface Estimate {
  contributions: Contribution[];
  offers: Offer[];
  finLiftSlope: number;
}

const FIN_METHOD = 'USAF DATCOM method: fin side force with sidewash factor, arms of the fin';
const SLOPE_METHOD = 'Lift slope of a finite wing, Polhamus’ form';
const DORSAL_METHOD = 'Rule of thumb: a dorsal fin raises the stall angle of the fin';
const RUDDER_METHOD = 'Thin-aerofoil flap effectiveness (Glauert, R&M 1095), with span share';
const STRIP_METHOD = 'Strip theory: dihedral and sweep of a tapered wing';
const POSITION_METHOD = 'DATCOM wing–body term for a low or high wing';
const MUNK_METHOD = 'Slender body (Munk, NACA Report 184)';
const CROSS_METHOD = 'Cross derivatives of the wing in proportion to the lift coefficient';

/** How sure each sum is, ±2σ in percent, and by which methods it is made. Sizes of the uncertainty: common practice. */
const SUMS: Readonly<Record<string, { method: string; uncertaintyPct: number }>> = {
  CY_beta: { method: `${FIN_METHOD}; ${MUNK_METHOD}`, uncertaintyPct: 20 },
  Cl_beta: { method: `${STRIP_METHOD}; ${POSITION_METHOD}; ${FIN_METHOD}`, uncertaintyPct: 25 },
  Cn_beta: { method: `${FIN_METHOD}; ${MUNK_METHOD}`, uncertaintyPct: 25 },
  Cl_p: {
    method: `Strip theory: roll damping of a tapered wing, with the induced flow of rolling (Glauert); ${FIN_METHOD}`,
    uncertaintyPct: 25,
  },
  CY_p: { method: `${FIN_METHOD}; wing and body left out`, uncertaintyPct: 50 },
  CY_r: { method: `${FIN_METHOD}; wing and body left out`, uncertaintyPct: 30 },
  Cn_p: { method: `${CROSS_METHOD}; ${FIN_METHOD}`, uncertaintyPct: 40 },
  Cl_r: { method: `${CROSS_METHOD}; ${FIN_METHOD}`, uncertaintyPct: 30 },
  Cn_r: { method: `${FIN_METHOD}; wing and body left out`, uncertaintyPct: 30 },
  CY_dr: { method: RUDDER_METHOD, uncertaintyPct: 20 },
  Cl_dr: { method: RUDDER_METHOD, uncertaintyPct: 35 },
  Cn_dr: { method: RUDDER_METHOD, uncertaintyPct: 20 },
};
/** The body at the foot of the fin acts as an end plate: so much of the fin's own aspect ratio counts. */
const END_PLATE = 1.55;

const SUBSCRIPTS: Readonly<Record<string, string>> = { beta: 'β', dr: 'δr' };
/** A derivative as the tables write it: "Cn β". */
export function letterOf(key: string): string {
  const [letter = '', suffix = ''] = key.split('_');
  return `${letter} ${SUBSCRIPTS[suffix] ?? suffix}`;
}

/** @throws {NumericsError} bad-argument naming the size that is not possible */
export function estimateAirframe(
  input: EstimatorInput,
  row: Readonly<Record<string, number>>,
  rowPointer: string,
): Estimate {
  const slope = finLiftSlope((END_PLATE * input.finSpanM * input.finSpanM) / input.finAreaM2, input.finSweepDeg * DEG);
  const aspectRatio = (input.wingSpanM * input.wingSpanM) / input.wingAreaM2;
  const geometry = {
    wingAreaM2: input.wingAreaM2,
    wingSpanM: input.wingSpanM,
    aspectRatio,
    wingSweepRad: input.wingSweepDeg * DEG,
    finAreaM2: input.finAreaM2,
    finSpanM: input.finSpanM,
    fuselageRadiusM: input.fuselageRadiusM,
    fuselageDepthM: input.fuselageDepthM,
    wingBelowCentreM: input.wingBelowCentreM,
    armM: input.armM,
    heightM: input.heightM,
    liftSlopePerRad: slope,
    alphaRad: input.alphaDeg * DEG,
  };
  const fin: Record<string, number> = {
    ...estimateFin(geometry),
    ...estimateRudder(geometry, input.rudderChordRatio, input.rudderSpanShare),
  };
  const body: Record<string, number> = {
    ...estimateBody({
      wingAreaM2: input.wingAreaM2,
      wingSpanM: input.wingSpanM,
      lengthM: input.fuselageLengthM,
      depthM: input.fuselageDepthM,
      widthM: input.fuselageWidthM,
      fullness: input.fuselageFullness,
    }),
    Cl_beta: estimateWingPosition(
      aspectRatio,
      input.wingSpanM,
      input.wingBelowCentreM,
      input.fuselageDepthM,
      input.fuselageWidthM,
    ),
  };
  const wing: Record<string, number> = {
    ...estimateCrossDerivatives(input.CL),
    Cl_p: estimateWingRollDamping(input.wingLiftSlope, input.taper, aspectRatio),
    Cl_beta: estimateDihedralEffect(
      input.dihedralDeg * DEG,
      input.wingSweepDeg * DEG,
      input.taper,
      input.wingLiftSlope,
      input.CL,
    ).total,
  };
  const contributions = Object.keys(SUMS).map((key): Contribution => {
    const parts = { wing: wing[key] ?? 0, body: body[key] ?? 0, fin: fin[key] ?? 0 };
    return { key, ...parts, sum: parts.wing + parts.body + parts.fin, total: row[key] ?? null };
  });
  const offers: Offer[] = contributions.map(({ key, sum }) => ({
    pointer: `${rowPointer}/${key}`,
    label: letterOf(key),
    value: sum,
    method: SUMS[key]?.method ?? '',
    uncertaintyPct: SUMS[key]?.uncertaintyPct ?? 50,
  }));
  offers.push(
    {
      pointer: '/fin/liftSlope_per_rad',
      label: 'Fin lift slope',
      value: slope,
      method: SLOPE_METHOD,
      uncertaintyPct: 15,
    },
    {
      pointer: '/fin/stallAngleWithDorsal_deg',
      label: 'Fin stall angle with dorsal fin',
      value: dorsalFinStallDeg(input.plainStallDeg, input.dorsalShare),
      method: DORSAL_METHOD,
      uncertaintyPct: 20,
    },
  );
  return { contributions, offers, finLiftSlope: slope };
}
