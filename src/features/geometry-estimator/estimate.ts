/** The contributions of fin, wing and the rest to each derivative, from geometry and from the draft's own totals. */
import {
  dorsalFinStallDeg,
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
  finAreaM2: number;
  finSpanM: number;
  finSweepDeg: number;
  armM: number;
  heightM: number;
  fuselageRadiusM: number;
  fuselageDepthM: number;
  wingBelowCentreM: number;
  rudderChordRatio: number;
  rudderSpanShare: number;
  dorsalShare: number;
  plainStallDeg: number;
}

export interface Contribution {
  key: string;
  fin: number;
  wing: number;
  /** What the draft holds; null when it holds nothing. */
  total: number | null;
}
export interface Estimate {
  contributions: Contribution[];
  /** Values that may be adopted: member of the row or of the fin, value, method. */
  offers: { pointer: string; label: string; value: number; method: string }[];
  finLiftSlope: number;
}

const METHOD = {
  fin: 'USAF DATCOM method: fin side force with sidewash factor, arms of the fin',
  slope: 'Lift slope of a finite wing, Helmbold–Polhamus form',
  dihedral: 'Strip theory: dihedral and sweep of a tapered wing',
  rudder: 'Thin-aerofoil flap effectiveness, with span share',
  dorsal: 'Rule of thumb: a dorsal fin raises the stall angle of the fin',
} as const;

/** @throws {NumericsError} bad-argument naming the size that is not possible */
export function estimateAirframe(
  input: EstimatorInput,
  row: Readonly<Record<string, number>>,
  rowPointer: string,
): Estimate {
  const aspect = (input.finSpanM * input.finSpanM) / input.finAreaM2;
  // The body at the foot of the fin acts as an end plate: one and a half times the fin's own aspect ratio.
  const slope = finLiftSlope(1.55 * aspect, input.finSweepDeg * DEG);
  const geometry = {
    wingAreaM2: input.wingAreaM2,
    wingSpanM: input.wingSpanM,
    aspectRatio: (input.wingSpanM * input.wingSpanM) / input.wingAreaM2,
    wingSweepRad: input.wingSweepDeg * DEG,
    finAreaM2: input.finAreaM2,
    finSpanM: input.finSpanM,
    fuselageRadiusM: input.fuselageRadiusM,
    fuselageDepthM: input.fuselageDepthM,
    wingBelowCentreM: input.wingBelowCentreM,
    armM: input.armM,
    heightM: input.heightM,
    liftSlopePerRad: slope,
    alphaRad: 0,
  };
  const fin = estimateFin(geometry);
  const rudder = estimateRudder(geometry, input.rudderChordRatio, input.rudderSpanShare);
  const wing = estimateDihedralEffect(
    input.dihedralDeg * DEG,
    input.wingSweepDeg * DEG,
    input.taper,
    input.wingLiftSlope,
    input.CL,
  );
  const finParts: Record<string, number> = { ...fin, ...rudder };
  const keys = ['CY_beta', 'Cl_beta', 'Cn_beta', 'Cn_r', 'Cl_r', 'Cl_p', 'Cn_p', 'CY_dr', 'Cl_dr', 'Cn_dr'];
  const contributions = keys.map((key) => ({
    key,
    fin: finParts[key] ?? 0,
    wing: key === 'Cl_beta' ? wing.total : 0,
    total: row[key] ?? null,
  }));
  const offers = [
    ...(['CY_dr', 'Cl_dr', 'Cn_dr'] as const).map((key) => ({
      pointer: `${rowPointer}/${key}`,
      label: key.replace('_', ' '),
      value: rudder[key],
      method: METHOD.rudder,
    })),
    {
      pointer: `${rowPointer}/Cl_beta`,
      label: 'Cl beta, fin and wing',
      value: fin.Cl_beta + wing.total,
      method: `${METHOD.dihedral}; ${METHOD.fin}`,
    },
    { pointer: '/fin/liftSlope_per_rad', label: 'Fin lift slope', value: slope, method: METHOD.slope },
    {
      pointer: '/fin/stallAngleWithDorsal_deg',
      label: 'Fin stall angle with dorsal fin',
      value: dorsalFinStallDeg(input.plainStallDeg, input.dorsalShare),
      method: METHOD.dorsal,
    },
  ];
  return { contributions, offers, finLiftSlope: slope };
}
