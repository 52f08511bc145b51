import { DEG } from '../../units/constants.ts';
import { rollRateExtrema, timeToBankS } from '../roll-performance.ts';
import { transferFunction } from '../transfer-functions.ts';
import type { TransferFunction } from '../transfer-functions.ts';
import { values } from './case-builders.ts';
import type { ValueRow } from './case-builders.ts';
import { DC8_APPROACH } from './data-sets.ts';
import { DC8_APPROACH_DIMENSIONAL, primedSystem } from './dimensional-sets.ts';
import { COMPUTED, modeOfKind } from './modes-helpers.ts';
import type { PublishedCase } from './published-case.ts';

const PHI = 3;

/** Sum and product of a complex pair of roots: s² + sum·s + product. */
function quadratic(roots: { re: Float64Array; im: Float64Array }): { sum: number; product: number } {
  const at = roots.im.findIndex((im) => im > 0);
  return { sum: -2 * roots.re[at], product: roots.re[at] * roots.re[at] + roots.im[at] * roots.im[at] };
}

function bankToAileron(): TransferFunction {
  const { A, aileron } = primedSystem(DC8_APPROACH_DIMENSIONAL);
  return transferFunction(A, aileron, PHI, 4);
}

/** φ/δa = 0.726(s² + 0.421s + 0.889)/((s − 0.013)(s + 1.121)(s² + 0.22s + 0.99)). */
function transferRows(): ValueRow[] {
  const { A } = primedSystem(DC8_APPROACH_DIMENSIONAL);
  const h = bankToAileron;
  return [
    ['dc8-bank-gain', 'φ/δa: gain', '1/s²', 0.726, '0.5 %', () => h().gain],
    ['dc8-bank-zero-sum', 'φ/δa: numerator, s', '1/s', 0.421, '0.5 %', () => quadratic(h().zeros).sum],
    ['dc8-bank-zero-product', 'φ/δa: numerator, constant', '1/s²', 0.889, '0.5 %', () => quadratic(h().zeros).product],
    // Printed to three decimals: the tolerance is one per cent, below half of the last digit.
    ['dc8-bank-spiral', 'φ/δa: spiral pole', '1/s', 0.013, '1 %', () => modeOfKind(A, 'spiral').re],
    ['dc8-bank-roll', 'φ/δa: roll pole', '1/s', -1.121, '0.5 %', () => modeOfKind(A, 'roll').re],
    // Printed to two decimals.
    ['dc8-bank-dutch-sum', 'φ/δa: Dutch roll, s', '1/s', 0.22, 0.005, () => quadratic(h().poles).sum],
    ['dc8-bank-dutch-product', 'φ/δa: Dutch roll, constant', '1/s²', 0.99, '0.5 %', () => quadratic(h().poles).product],
  ];
}

/** Extrema of roll rate after a 10° aileron step, and time to 30° of bank. */
function stepRows(): ValueRow[] {
  const step = 10;
  const extrema = () => {
    const { A, aileron } = primedSystem(DC8_APPROACH_DIMENSIONAL);
    return rollRateExtrema(A, aileron);
  };
  const expected = [
    ['peak', 2.374, 6.4156],
    ['minimum', 4.84, 5.4012],
    ['second', 8.338, 6.9092],
  ] as const;
  const instant = { lagS: 0, rateRadS: Infinity, maxRad: step * DEG };
  const bank = () => {
    const { A, aileron } = primedSystem(DC8_APPROACH_DIMENSIONAL);
    return timeToBankS(A, aileron, 4, instant, 30 * DEG) ?? NaN;
  };
  const rollAlone = () => {
    const { primed } = DC8_APPROACH_DIMENSIONAL;
    const A = new Float64Array(16);
    A[5] = primed.Lp;
    A[13] = 1;
    return timeToBankS(A, [0, primed.Lda, 0, 0], 4, instant, 30 * DEG) ?? NaN;
  };
  return [
    ...expected.flatMap(([which, time, rate]): ValueRow[] => [
      [
        `dc8-step-${which}-time`,
        `10° aileron: time of roll-rate ${which}`,
        's',
        time,
        1e-3,
        () => extrema()[which]?.timeS ?? NaN,
      ],
      [
        `dc8-step-${which}-rate`,
        `10° aileron: roll-rate ${which}`,
        '°/s',
        rate,
        1e-3,
        () => step * (extrema()[which]?.rate ?? NaN),
      ],
    ]),
    ['dc8-step-bank', '10° aileron: time to 30° of bank', 's', 5.687, 1e-3, bank],
    ['dc8-step-bank-alone', '10° aileron: the same, roll alone', 's', 4.969, 1e-3, rollAlone],
  ];
}

/** The DC-8: transfer function and step response. */
export function responseCases(): PublishedCase[] {
  const seen = { source: DC8_APPROACH.source, provenance: 'seen' } as const;
  return [
    ...values({ group: 'Transfer function: DC-8 approach', ...seen }, transferRows()),
    ...values({ group: 'Step response: DC-8 approach', ...COMPUTED }, stepRows()),
  ];
}
