import { DEG, FT, KT, LBF } from '../../units/constants.ts';
import {
  CERTIFICATION,
  designGustMps,
  gustVelocityMps,
  MILITARY_CROSSWIND_MPS,
  referenceGustMps,
} from '../certification.ts';
import {
  APPROACH_ROLL_SHARE,
  APPROACH_SIDESLIP_DEG,
  CLASS_III_LARGEST_ZETA,
  COUPLED_ROLL_SPIRAL_MINIMA,
  dutchRollMinima,
  PART_23_ZETA,
  ROLL_COUPLING_RISE,
  ROLL_COUPLING_START,
  rollModeMaxima,
  rollOscillationMinima,
  spiralMinima,
  timeToBankLimits,
} from '../criteria-tables.ts';
import type { AircraftClass, FlightCategory, SpeedRange } from '../criteria-tables.ts';
import { facts, values } from './case-builders.ts';
import type { FactRow } from './case-builders.ts';
import type { PublishedCase } from './published-case.ts';

/** One published row of numbers beside the row that the criteria use. */
function row(id: string, what: string, published: readonly number[], used: () => readonly number[]): FactRow {
  return [
    id,
    what,
    published.join(' / '),
    () => {
      const present = used();
      const holds = present.length === published.length && present.every((value, i) => value === published[i]);
      return { holds, shown: present.join(' / ') };
    },
  ];
}

/** Table VI, Level 1: class, category, ζ, ζω, ω. */
const DUTCH_ROLL: readonly (readonly [AircraftClass, FlightCategory, number, number, number])[] = [
  ['I', 'A', 0.19, 0.35, 1],
  ['IV', 'A', 0.19, 0.35, 1],
  ['II-L', 'A', 0.19, 0.35, 0.4],
  ['II-C', 'A', 0.19, 0.35, 0.4],
  ['III', 'A', 0.19, 0.35, 0.4],
  ['I', 'B', 0.08, 0.15, 0.4],
  ['II-L', 'B', 0.08, 0.15, 0.4],
  ['III', 'B', 0.08, 0.15, 0.4],
  ['IV', 'B', 0.08, 0.15, 0.4],
  ['I', 'C', 0.08, 0.15, 1],
  ['II-C', 'C', 0.08, 0.15, 1],
  ['IV', 'C', 0.08, 0.15, 1],
  ['II-L', 'C', 0.08, 0.1, 0.4],
  ['III', 'C', 0.08, 0.1, 0.4],
];

/** Table VII: class, category, Levels 1, 2, 3. */
const ROLL_MODE: readonly (readonly [AircraftClass, FlightCategory, number, number, number])[] = [
  ['I', 'A', 1, 1.4, 10],
  ['IV', 'A', 1, 1.4, 10],
  ['II-L', 'A', 1.4, 3, 10],
  ['III', 'A', 1.4, 3, 10],
  ['I', 'B', 1.4, 3, 10],
  ['III', 'B', 1.4, 3, 10],
  ['I', 'C', 1, 1.4, 10],
  ['II-C', 'C', 1, 1.4, 10],
  ['IV', 'C', 1, 1.4, 10],
  ['II-L', 'C', 1.4, 3, 10],
  ['III', 'C', 1.4, 3, 10],
];

/** Table IX: class, category, speed range, angle, Levels 1, 2, 3. */
const TIME_TO_BANK: readonly (readonly [AircraftClass, FlightCategory, SpeedRange, number, number, number, number])[] =
  [
    ['I', 'A', 'low', 60, 1.3, 1.7, 2.6],
    ['I', 'B', 'low', 60, 1.7, 2.5, 3.4],
    ['I', 'C', 'low', 30, 1.3, 1.8, 2.6],
    ['II-L', 'A', 'low', 45, 1.4, 1.9, 2.8],
    ['II-L', 'B', 'low', 45, 1.9, 2.8, 3.8],
    ['II-L', 'C', 'low', 30, 1.8, 2.5, 3.6],
    ['II-C', 'A', 'low', 45, 1.4, 1.9, 2.8],
    ['II-C', 'B', 'low', 45, 1.9, 2.8, 3.8],
    ['II-C', 'C', 'low', 25, 1, 1.5, 2],
    ['III', 'A', 'low', 30, 1.8, 2.4, 3],
    ['III', 'B', 'low', 30, 2.3, 3.9, 5],
    ['III', 'C', 'low', 30, 2.5, 4, 6],
    ['III', 'A', 'medium', 30, 1.5, 2, 3],
    ['III', 'B', 'medium', 30, 2, 3.3, 5],
    ['III', 'C', 'medium', 30, 2.5, 4, 6],
    ['III', 'A', 'high', 30, 2, 2.5, 3],
    ['III', 'B', 'high', 30, 2.3, 3.9, 5],
    ['III', 'C', 'high', 30, 2.5, 4, 6],
    ['IV', 'A', 'low', 30, 1.1, 1.5, 2],
    ['IV', 'A', 'medium', 90, 1.3, 1.7, 2.6],
    ['IV', 'B', 'medium', 90, 1.7, 2.5, 3.4],
    ['IV', 'C', 'low', 30, 1.1, 1.3, 2],
  ];

function militaryCases(): PublishedCase[] {
  const seen = { source: 'MIL-F-8785C, 5 November 1980', provenance: 'seen' } as const;
  const dutch = DUTCH_ROLL.map(([klass, category, zeta, zetaOmega, omega]): FactRow => {
    const published = [zeta, zetaOmega, omega, 0.02, 0.05, 0.4, 0, 0, 0.4];
    return row(`mil-vi-${klass}-${category}`, `Table VI, class ${klass}, category ${category}`, published, () =>
      dutchRollMinima(klass, category).flatMap((limits) => [limits.zeta, limits.zetaOmega, limits.omega]),
    );
  });
  const roll = ROLL_MODE.map(([klass, category, ...limits]): FactRow =>
    row(`mil-vii-${klass}-${category}`, `Table VII, class ${klass}, category ${category}`, limits, () =>
      rollModeMaxima(klass, category),
    ),
  );
  const spiral = (['A', 'B', 'C'] as const).map((category): FactRow =>
    row(`mil-viii-${category}`, `Table VIII, category ${category}`, [category === 'B' ? 20 : 12, 8, 4], () =>
      spiralMinima(category),
    ),
  );
  const bank = TIME_TO_BANK.map(([klass, category, range, ...limits]): FactRow =>
    row(
      `mil-ix-${klass}-${category}-${range}`,
      `Table IX, class ${klass}, category ${category}, ${range} speed`,
      limits,
      () => {
        const { angleDeg, seconds } = timeToBankLimits(klass, category, range);
        return [angleDeg, ...seconds];
      },
    ),
  );
  return [
    ...facts({ group: 'MIL-F-8785C: Dutch roll', ...seen }, [
      ...dutch,
      row('mil-vi-rise', 'Rise of ζω above ω²|φ/β| = 20', [20, 0.014, 0.009, 0.005], () => [
        ROLL_COUPLING_START,
        ...ROLL_COUPLING_RISE,
      ]),
      row('mil-vi-class-iii', 'Most damping asked of class III', [0.7], () => [CLASS_III_LARGEST_ZETA]),
    ]),
    ...facts({ group: 'MIL-F-8785C: roll and spiral', ...seen }, [
      ...roll,
      ...spiral,
      row('mil-coupled', '3.3.1.4 coupled roll–spiral, ζω', [0.5, 0.3, 0.15], () => COUPLED_ROLL_SPIRAL_MINIMA),
      row('mil-oscillation-ac', '3.3.2.2 roll-rate oscillation, categories A and C', [0.6, 0.25], () =>
        rollOscillationMinima('C'),
      ),
      row('mil-oscillation-b', '3.3.2.2 roll-rate oscillation, category B, Level 1', [0.25], () => [
        rollOscillationMinima('B')[0],
      ]),
      row('mil-sideslip', '3.3.7.1 sideslip on the approach, share of roll control', [10, 0.75], () => [
        APPROACH_SIDESLIP_DEG,
        APPROACH_ROLL_SHARE,
      ]),
    ]),
    ...facts(
      {
        group: 'MIL-F-8785C: time to bank',
        ...seen,
        source: `${seen.source}, table IX (III and IV in one transcription)`,
      },
      bank,
    ),
    ...values({ group: 'MIL-F-8785C: engine failure and crosswind', ...seen, provenance: 'memory' }, [
      ['mil-crosswind-i', '3.3.7 crosswind, class I', 'kt', 20, 1e-9, () => MILITARY_CROSSWIND_MPS.I / KT],
      [
        'mil-crosswind-other',
        '3.3.7 crosswind, classes II to IV',
        'kt',
        30,
        1e-9,
        () => MILITARY_CROSSWIND_MPS.other / KT,
      ],
      [
        'mil-failure-roll',
        '3.3.9.2 roll control after a failure',
        '',
        0.75,
        1e-9,
        () => CERTIFICATION.militaryRollShare,
      ],
      [
        'mil-failure-pedal',
        '3.3.9.2 pedal force after a failure',
        'lbf',
        180,
        1e-9,
        () => CERTIFICATION.militaryPedalForceN / LBF,
        { provenance: 'seen' },
      ],
    ]),
  ];
}

function paragraphCases(): PublishedCase[] {
  const seen = { source: '14 CFR parts 23 and 25', provenance: 'seen' } as const;
  const memory = { provenance: 'memory' } as const;
  return values({ group: 'Certification paragraphs', ...seen }, [
    ['cfr-25149-bank', '25.149(b): bank', '°', 5, 1e-9, () => CERTIFICATION.controlSpeedBankRad / DEG],
    ['cfr-25149-force', '25.149(d): rudder force', 'N', 667, 0.5, () => CERTIFICATION.pedalForceN],
    ['cfr-25149-heading', '25.149(d): heading change', '°', 20, 1e-9, () => CERTIFICATION.headingChangeRad / DEG],
    ['cfr-25149-stall', '25.149(c): VMC over VSR', '', 1.13, 1e-9, () => CERTIFICATION.part25StallShare],
    [
      'cfr-25149-ground',
      '25.149(e): deviation on the ground',
      'ft',
      30,
      1e-9,
      () => CERTIFICATION.groundDeviationM / FT,
    ],
    [
      'cfr-25147-heading',
      '25.147(a): heading change, wings level',
      '°',
      15,
      1e-9,
      () => CERTIFICATION.levelHeadingChangeRad / DEG,
    ],
    ['cfr-25147-speed', '25.147(a): speed over VSR1', '', 1.3, 1e-9, () => CERTIFICATION.levelHeadingStallShare],
    ['cfr-23149-stall', '23.149: VMC over VS1', '', 1.2, 1e-9, () => CERTIFICATION.part23StallShare],
    ['cfr-23181', '23.181(b): least Dutch roll damping', '', 0.052, 1e-9, () => PART_23_ZETA, memory],
    ['cfr-25237-least', '25.237(a): least crosswind', 'kt', 20, 1e-9, () => CERTIFICATION.crosswindLeastMps / KT],
    ['cfr-25237-most', '25.237(a): need not exceed', 'kt', 25, 1e-9, () => CERTIFICATION.crosswindMostMps / KT],
    [
      'cfr-25237-share',
      '25.237(a), 23.233: share of the stall speed',
      '',
      0.2,
      1e-9,
      () => CERTIFICATION.crosswindStallShare,
    ],
    ['cfr-25341-sea', '25.341(a): Uref at sea level', 'ft/s', 56, 1e-9, () => referenceGustMps(0) / FT],
    ['cfr-25341-15000', '25.341(a): Uref at 15,000 ft', 'ft/s', 44, 1e-9, () => referenceGustMps(15_000 * FT) / FT],
    ['cfr-25341-60000', '25.341(a): Uref at 60,000 ft', 'ft/s', 20.86, 1e-9, () => referenceGustMps(60_000 * FT) / FT],
    ['cfr-25341-7500', '25.341(a): Uref at 7,500 ft, linear', 'ft/s', 50, 1e-9, () => referenceGustMps(7500 * FT) / FT],
    ['cfr-25341-uds', '25.341(a): Uds at H = 350 ft', 'ft/s', 56, 1e-9, () => designGustMps(0, 350 * FT) / FT, memory],
    // (30/350)^(1/6) = 0.664012
    [
      'cfr-25341-short',
      '25.341(a): Uds at H = 30 ft',
      'ft/s',
      37.1846,
      1e-3,
      () => designGustMps(0, 30 * FT) / FT,
      memory,
    ],
    ['cfr-25341-peak', '25.341(a): U at s = H', 'ft/s', 56, 1e-9, () => gustVelocityMps(56, 350, 350), memory],
    ['cfr-25341-half', '25.341(a): U at s = H/2', 'ft/s', 28, 1e-9, () => gustVelocityMps(56, 350, 175), memory],
    ['cfr-25341-end', '25.341(a): U at s = 2H', 'ft/s', 0, 1e-9, () => gustVelocityMps(56, 350, 700), memory],
  ]);
}

/** The specification's tables and the paragraphs' numbers, each typed a second time beside what the code uses. */
export function criteriaCases(): PublishedCase[] {
  return [...militaryCases(), ...paragraphCases()];
}
