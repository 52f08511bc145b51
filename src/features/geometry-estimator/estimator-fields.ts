/** The sizes the estimator asks for, and what it begins from where the data has none. */
import type { Dimension } from '#shared/units/quantity.ts';
import type { EstimatorInput } from './estimate.ts';

export interface EstimatorField {
  key: keyof EstimatorInput;
  label: string;
  dimension: Dimension;
  unit: string;
}
export const ESTIMATOR_FIELDS: readonly { title: string; fields: readonly EstimatorField[] }[] = [
  {
    title: 'Wing',
    fields: [
      { key: 'dihedralDeg', label: 'Dihedral', dimension: 'angle', unit: 'deg' },
      { key: 'wingSweepDeg', label: 'Sweep of the quarter chord', dimension: 'angle', unit: 'deg' },
      { key: 'taper', label: 'Taper', dimension: 'ratio', unit: '' },
      { key: 'wingLiftSlope', label: 'Lift slope, per rad', dimension: 'ratio', unit: '' },
      { key: 'CL', label: 'Lift coefficient', dimension: 'ratio', unit: '' },
      { key: 'alphaDeg', label: 'Angle of attack', dimension: 'angle', unit: 'deg' },
    ],
  },
  {
    title: 'Body',
    fields: [
      { key: 'fuselageLengthM', label: 'Length', dimension: 'distance', unit: 'm' },
      { key: 'fuselageDepthM', label: 'Greatest depth', dimension: 'distance', unit: 'm' },
      { key: 'fuselageWidthM', label: 'Greatest width', dimension: 'distance', unit: 'm' },
      { key: 'fuselageFullness', label: 'Volume over its box', dimension: 'ratio', unit: '' },
      { key: 'fuselageRadiusM', label: 'Radius at the fin', dimension: 'distance', unit: 'm' },
      { key: 'wingBelowCentreM', label: 'Wing below the centre line', dimension: 'distance', unit: 'm' },
    ],
  },
  {
    title: 'Fin, rudder, dorsal fin',
    fields: [
      { key: 'finAreaM2', label: 'Fin area', dimension: 'area', unit: 'm²' },
      { key: 'finSpanM', label: 'Fin span', dimension: 'distance', unit: 'm' },
      { key: 'finSweepDeg', label: 'Sweep of the half chord', dimension: 'angle', unit: 'deg' },
      { key: 'armM', label: 'Arm behind the mass centre', dimension: 'distance', unit: 'm' },
      { key: 'heightM', label: 'Height above it', dimension: 'distance', unit: 'm' },
      { key: 'rudderChordRatio', label: 'Rudder chord share', dimension: 'ratio', unit: '' },
      { key: 'rudderSpanShare', label: 'Rudder span share', dimension: 'ratio', unit: '' },
      { key: 'dorsalShare', label: 'Dorsal fin, share of the fin area', dimension: 'ratio', unit: '' },
      { key: 'plainStallDeg', label: 'Stall angle without it', dimension: 'angle', unit: 'deg' },
    ],
  },
];

/** Where the data has a size it is taken; the rest are usual proportions of the span, to be replaced. */
export function startingInput(
  numberAt: (pointer: string, fallback: number) => number,
  row: Readonly<Record<string, number>>,
): EstimatorInput {
  const span = numberAt('/geometry/wingSpan_m', 12);
  const area = numberAt('/geometry/wingArea_m2', 18);
  const finArea = numberAt('/fin/area_m2', area * 0.12);
  const depth = span * 0.09;
  const round = (value: number): number => Number(value.toPrecision(4));
  return {
    wingAreaM2: area,
    wingSpanM: span,
    wingSweepDeg: 0,
    dihedralDeg: 5,
    taper: 0.7,
    wingLiftSlope: 4.8,
    CL: row['CL'] ?? 0.8,
    alphaDeg: row['alpha_deg'] ?? 0,
    finAreaM2: round(finArea),
    finSpanM: round(Math.sqrt(finArea * 1.4)),
    finSweepDeg: 20,
    armM: round(numberAt('/fin/arm_m', span * 0.42)),
    heightM: round(numberAt('/fin/height_m', span * 0.07)),
    fuselageRadiusM: round(depth * 0.3),
    fuselageDepthM: round(depth),
    fuselageWidthM: round(depth),
    fuselageLengthM: round(span * 0.85),
    fuselageFullness: 0.5,
    wingBelowCentreM: round(depth * 0.25),
    rudderChordRatio: 0.4,
    rudderSpanShare: 0.9,
    dorsalShare: 0.08,
    plainStallDeg: numberAt('/fin/stallAngle_deg', 17),
  };
}
