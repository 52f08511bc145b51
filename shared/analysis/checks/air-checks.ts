import { FT, KT } from '../../units/constants.ts';
import { createStream } from '../../numerics/random.ts';
import { densityAt } from '../../model/atmosphere.ts';
import { easFromTas, machFromTas, tasFromCas } from '../../model/airspeeds.ts';
import {
  advanceTurbulence,
  lateralGustMps,
  rollGustSigmaRadS,
  startTurbulence,
  turbulenceScaleInto,
  yawGustRadS,
} from '../../model/turbulence.ts';
import { DEG } from '../../units/constants.ts';
import { values } from './case-builders.ts';
import type { ValueRow } from './case-builders.ts';
import { COMPUTED } from './modes-helpers.ts';
import type { PublishedCase } from './published-case.ts';

const DENSITIES: readonly (readonly [number, number])[] = [
  [0, 1.225],
  [10_000, 0.90464],
  [20_000, 0.65269],
  [36_089, 0.36392],
  [40_000, 0.30156],
];

/** CAS kt, height ft, Mach, TAS kt, EAS kt. */
const SPEEDS: readonly (readonly [number, number, number, number, number])[] = [
  [100, 5000, 0.1656, 107.67, 99.94],
  [250, 10_000, 0.4523, 288.7, 248.1],
  [300, 30_000, 0.7906, 465.94, 285],
];

function atmosphereRows(): ValueRow[] {
  return DENSITIES.map(([feet, density]) => [
    `isa-density-${feet}`,
    `Density at ${feet} ft`,
    'kg/m³',
    density,
    5e-6,
    () => densityAt(feet * FT),
  ]);
}

function speedRows(): ValueRow[] {
  return SPEEDS.flatMap(([cas, feet, mach, tas, eas]): ValueRow[] => {
    const height = feet * FT;
    const trueSpeed = () => tasFromCas(cas * KT, height);
    const what = `${cas} kt CAS at ${feet} ft`;
    return [
      [`cas-mach-${cas}`, `${what}: Mach`, '', mach, 5e-5, () => machFromTas(trueSpeed(), height)],
      [`cas-tas-${cas}`, `${what}: true airspeed`, 'kt', tas, 5e-3, () => trueSpeed() / KT],
      [`cas-eas-${cas}`, `${what}: equivalent airspeed`, 'kt', eas, 5e-3, () => easFromTas(trueSpeed(), height) / KT],
    ];
  });
}

function scaleAt(heightFt: number) {
  const scale = { lateralLengthM: 0, verticalLengthM: 0, lateralSigmaMps: 0, verticalSigmaMps: 0 };
  turbulenceScaleInto(scale, 30 * KT, 6 * FT, heightFt * FT);
  return scale;
}

/** Condition of the two filter variances. */
const FILTER = { V: 200 * FT, L: 505.169 * FT, sigmaV: 5.148 * FT, span: 36.9 * FT, Lw: 100 * FT, sigmaW: 3 * FT };
const DRAWS = 60_000;
/** Long enough between draws that they are nearly independent. */
const DRAW_STEP_S = 4;

/** rms of a filter output over many exact steps; the seed is fixed, the sampling error of 60,000 draws about 0.3 %. */
function filterRms(output: (state: number[]) => number): number {
  const stream = createStream(20, 'turbulence check');
  const state = [0, 0, 0, 0];
  startTurbulence(state, 0, stream, FILTER.V, FILTER.L, FILTER.span);
  let square = 0;
  for (let i = 0; i < DRAWS; i++) {
    advanceTurbulence(state, 0, stream, FILTER.V, FILTER.L, FILTER.span, DRAW_STEP_S);
    const value = output(state);
    square += value * value;
  }
  return Math.sqrt(square / DRAWS);
}

function turbulenceRows(): ValueRow[] {
  const ratio = (feet: number) => scaleAt(feet).lateralSigmaMps / scaleAt(feet).verticalSigmaMps;
  return [
    ['dryden-L-100', 'Lateral scale length at 100 ft', 'ft', 505.169, 1e-3, () => scaleAt(100).lateralLengthM / FT],
    ['dryden-ratio-100', 'σv/σw at 100 ft', '', 1.715849, 1e-6, () => ratio(100)],
    [
      'dryden-L-500',
      'Lateral scale length at 500 ft',
      'ft',
      944.657,
      1e-3,
      () => scaleAt(500).lateralLengthM / FT,
      COMPUTED,
    ],
    ['dryden-ratio-500', 'σv/σw at 500 ft', '', 1.236236, 1e-6, () => ratio(500), COMPUTED],
    [
      'dryden-sigma-w',
      'σw below 1,000 ft with 30 kt at 20 ft',
      'kt',
      3,
      1e-9,
      () => scaleAt(500).verticalSigmaMps / KT,
    ],
    ['dryden-L-high', 'Scale length above 2,000 ft', 'ft', 1750, 1e-9, () => scaleAt(2500).lateralLengthM / FT],
    [
      'dryden-v-rms',
      'Side gust: rms over σ of the exact filter steps',
      '',
      1,
      '1 %',
      () => filterRms((state) => lateralGustMps(state, 0, FILTER.sigmaV)) / FILTER.sigmaV,
      COMPUTED,
    ],
    [
      'dryden-r-rms',
      'Yaw gust: rms of the exact filter steps',
      '°/s',
      2.58926,
      '1 %',
      () => filterRms((state) => yawGustRadS(state, 0, FILTER.sigmaV, FILTER.span)) / DEG,
      COMPUTED,
    ],
    [
      'dryden-p-rms',
      'Roll gust: rms',
      '°/s',
      3.18829,
      1e-4,
      () => rollGustSigmaRadS(FILTER.sigmaW, FILTER.Lw, FILTER.span) / DEG,
      COMPUTED,
    ],
  ];
}

/** Standard atmosphere, airspeeds and turbulence. */
export function airCases(): PublishedCase[] {
  const isa = { source: 'ISO 2533:1975, Standard Atmosphere', provenance: 'seen' } as const;
  const pitot = { source: 'compressible pitot relation in the standard atmosphere', provenance: 'computed' } as const;
  const dryden = { source: 'MIL-F-8785C 3.7 (Dryden)', provenance: 'seen' } as const;
  return [
    ...values({ group: 'Standard atmosphere', ...isa }, atmosphereRows()),
    ...values({ group: 'Airspeeds', ...pitot }, speedRows()),
    ...values({ group: 'Turbulence', ...dryden }, turbulenceRows()),
  ];
}
