import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import { eigenvalues4Into } from '#shared/numerics/eigen4.ts';
import { createStream } from '#shared/numerics/random.ts';
import type { Stream } from '#shared/numerics/random.ts';
import { backwardError } from '../../unit/numerics/backward-error.ts';
import { randomLateral, randomMatrix } from '../../unit/numerics/matrix-samples.ts';
import { defineBench, measureAllocation, timePair } from '../harness.ts';

const MATRICES = 2000;
/** Passes over the matrices per timed call: the fast routine needs more of them to be measurable. */
const PASSES = 100;
const BASELINE_PASSES = 4;
const LARGEST_RATIO = 1 / 50;
const LARGEST_RESIDUAL = 1e-9;
const RANDOM_COUNT = 100_000;
const LATERAL_COUNT = 10_000;

/** Ordinary lateral matrices, as a sweep meets them. */
function sweepMatrices(): Float64Array[] {
  const stream = createStream(1, 'bench');
  return Array.from({ length: MATRICES }, (_, i) => randomLateral(stream, 10 * i));
}

/** Failures and worst backward error over many matrices. */
function accuracy(count: number, sample: (stream: Stream, index: number) => Float64Array) {
  const stream = createStream(2, 'accuracy');
  const out = new Float64Array(8);
  let failures = 0;
  let worst = 0;
  for (let i = 0; i < count; i++) {
    const a = sample(stream, i);
    try {
      eigenvalues4Into(out, a);
    } catch {
      failures++;
      continue;
    }
    for (let j = 0; j < 8; j += 2)
      if (out[j + 1] >= 0) worst = Math.max(worst, backwardError(a, 4, out[j], out[j + 1]));
  }
  return { failures, worst };
}

export default defineBench({
  name: 'eigen-4x4',
  claim: 'eigenvalues of 4×4 matrices at least 50 times faster than a full decomposition, residual below 1e-9',
  run({ note }) {
    const matrices = sweepMatrices();
    const out = new Float64Array(8);
    const subject = () => {
      let sum = 0;
      for (let pass = 0; pass < PASSES; pass++) {
        for (const a of matrices) {
          eigenvalues4Into(out, a);
          sum += out[0];
        }
      }
      return sum;
    };
    const baseline = () => {
      let sum = 0;
      for (let pass = 0; pass < BASELINE_PASSES; pass++) {
        for (const a of matrices) {
          const { realEigenvalues, imaginaryEigenvalues } = new EigenvalueDecomposition(Matrix.from1DArray(4, 4, a));
          sum += realEigenvalues[0] + imaginaryEigenvalues[0];
        }
      }
      return sum;
    };
    const timing = timePair(subject, baseline);
    const ratio = (timing.ratio * BASELINE_PASSES) / PASSES;
    const perMatrix = (ms: number, passes: number) => (ms * 1e6) / (passes * MATRICES);
    note('checking 110,000 matrices');
    const random = accuracy(RANDOM_COUNT, randomMatrix);
    const lateral = accuracy(LATERAL_COUNT, randomLateral);
    const failures = random.failures + lateral.failures;
    const worst = Math.max(random.worst, lateral.worst);
    const allocation = measureAllocation(subject);
    return {
      value: perMatrix(timing.subjectMs, PASSES),
      unit: 'ns',
      ratio,
      baseline: `ml-matrix, ${perMatrix(timing.baselineMs, BASELINE_PASSES).toFixed(0)} ns`,
      goal: 'ratio ≤ 0.02, no failure, residual ≤ 1e-9',
      met: ratio <= LARGEST_RATIO && failures === 0 && worst <= LARGEST_RESIDUAL,
      details: [
        { label: 'failures in 110,000 matrices', value: failures, unit: '' },
        { label: 'worst residual', value: worst, unit: '' },
        { label: 'heap per matrix', value: allocation.bytes / (PASSES * MATRICES), unit: 'bytes' },
      ],
    };
  },
});
