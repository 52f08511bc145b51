/**
 * Scales of the drawn forces and moments. Each kind has its own scale, fixed by the airframe, never by the moment:
 * arrows of one kind compare by length, arrows of different kinds do not. The references are ours.
 */
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { G0 } from '#shared/units/constants.ts';
import type { ArrowId } from '../stage-types.ts';

export type ArrowGroup = 'side' | 'lift' | 'thrust' | 'weight' | 'moment';

export interface GroupScale {
  group: ArrowGroup;
  arrows: readonly ArrowId[];
  /** Force or moment that is drawn `drawn` long. */
  reference: number;
  unit: 'N' | 'N·m';
  /** Metres in the scene, or radians of arc. */
  drawn: number;
}

export interface ArrowScale {
  groups: readonly GroupScale[];
  /** Metres per newton. */
  perNewton: Readonly<Record<Exclude<ArrowId, 'N' | 'L'>, number>>;
  /** Radians of arc per newton metre. */
  perNewtonMetre: number;
  /** One sentence for the legend. */
  text: string;
}

/** An arrow longer than this (spans) is cut with a break mark, an arc ends here (rad). */
export const LONGEST_SPANS = 0.95;
export const LONGEST_ARC_RAD = 2.6;

/** The scales of an airframe. */
export function arrowScale(airframe: Pick<Airframe, 'geometry' | 'mass' | 'engines'>): ArrowScale {
  const span = airframe.geometry.wingSpan_m;
  const weight = airframe.mass.mass_kg * G0;
  const strongest = Math.max(0, ...airframe.engines.map((engine) => engine.staticThrust_N));
  const groups: readonly GroupScale[] = [
    { group: 'side', arrows: ['R', 'F', 'Y'], reference: 0.1 * weight, unit: 'N', drawn: 0.4 * span },
    { group: 'lift', arrows: ['LL', 'LR'], reference: 0.5 * weight, unit: 'N', drawn: 0.42 * span },
    {
      group: 'thrust',
      arrows: ['T', 'D'],
      reference: strongest > 0 ? strongest : 0.2 * weight,
      unit: 'N',
      drawn: 0.5 * span,
    },
    { group: 'weight', arrows: ['W'], reference: weight, unit: 'N', drawn: 0.42 * span },
    { group: 'moment', arrows: ['N', 'L'], reference: 0.02 * weight * span, unit: 'N·m', drawn: Math.PI / 3 },
  ];
  const [side, lift, thrust, heavy, moment] = groups.map((group) => group.drawn / group.reference);
  return {
    groups,
    perNewton: { R: side, F: side, Y: side, LL: lift, LR: lift, T: thrust, D: thrust, W: heavy },
    perNewtonMetre: moment,
    text: `Scaled by kind. As long as half the span: ${groups
      .filter((group) => group.unit === 'N')
      .map((group) => `${group.arrows.join(', ')} ${newtons((group.reference * span) / 2 / group.drawn)}`)
      .join('; ')}. A sixth of a turn: N, L ${newtonMetres(groups[4].reference)}.`,
  };
}

const newtons = (value: number): string => (value >= 1000 ? `${short(value / 1000)} kN` : `${short(value)} N`);
const newtonMetres = (value: number): string => (value >= 1000 ? `${short(value / 1000)} kN·m` : `${short(value)} N·m`);
const short = (value: number): string => (value >= 100 ? value.toFixed(0) : value.toPrecision(2));
