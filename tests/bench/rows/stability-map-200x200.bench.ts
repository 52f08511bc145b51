import { stabilityMap } from '#shared/analysis/stability-map.ts';
import { bilinearSystem } from '#shared/analysis/sweeps.ts';
import { prepareAircraft } from '#shared/model/aircraft.ts';
import { eigenvalues4Into } from '#shared/numerics/eigen4.ts';
import { SHIPPED } from '../../reference/shipped-airframes.ts';
import { defineBench, timePair } from '../harness.ts';

const SIDE = 200;
const LONGEST_MS = 120;
const LONGEST_OVERHEAD_US = 2;

function range(from: number, to: number): Float64Array {
  return Float64Array.from({ length: SIDE }, (_, i) => from + ((to - from) * i) / (SIDE - 1));
}

export default defineBench({
  name: 'stability-map-200x200',
  claim: 'Dutch roll, roll, spiral and level over Cl_beta × Cn_beta in 120 ms, 2 µs a cell beyond the eigenvalues',
  run() {
    const aircraft = prepareAircraft(SHIPPED['twin-jet']);
    const system = bilinearSystem(aircraft, { tasMps: 75, heightM: 0 }, 'Cl_beta', 'Cn_beta');
    const xs = range(-0.3, 0.05);
    const ys = range(-0.05, 0.3);
    const a = new Float64Array(16);
    const out = new Float64Array(8);
    /** The eigenvalues of the same cells and nothing else. */
    const eigenvalues = () => {
      let sum = 0;
      for (const y of ys) {
        for (const x of xs) {
          for (let k = 0; k < 16; k++) a[k] = system.base[k] + x * system.alongX[k] + y * system.alongY[k];
          eigenvalues4Into(out, a);
          sum += out[0];
        }
      }
      return sum;
    };
    const timing = timePair(() => stabilityMap(system, xs, ys, 'III', 'C'), eigenvalues);
    const overheadUs = ((timing.subjectMs - timing.baselineMs) * 1000) / (SIDE * SIDE);
    return {
      value: timing.subjectMs,
      unit: 'ms',
      ratio: timing.ratio,
      baseline: `eigenvalues alone, ${timing.baselineMs.toFixed(1)} ms`,
      goal: '≤ 120 ms, overhead ≤ 2 µs a cell',
      met: timing.subjectMs <= LONGEST_MS && overheadUs <= LONGEST_OVERHEAD_US,
      details: [{ label: 'overhead per cell', value: overheadUs, unit: 'µs' }],
    };
  },
});
