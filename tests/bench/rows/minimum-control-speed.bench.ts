import { controlSpeedFactors } from '#shared/analysis/control-speed-factors.ts';
import { minimumControlSpeed } from '#shared/analysis/minimum-control-speed.ts';
import { prepareAircraft } from '#shared/model/aircraft.ts';
import { SHIPPED, SHIPPED_SLUGS } from '../../reference/shipped-airframes.ts';
import { defineBench, median, timeOnce } from '../harness.ts';

const SOLVES = 100;
const ROUNDS = 15;
const LONGEST_SOLVE_MS = 0.2;
const LONGEST_TABLE_MS = 20;

/** Median milliseconds of one call, after the first rounds. */
function medianMs(action: () => unknown): number {
  const times = Array.from({ length: ROUNDS + 5 }, () => timeOnce(action));
  return median(times.slice(5));
}

export default defineBench({
  name: 'minimum-control-speed',
  claim: 'one static minimum control speed in 0.2 ms, the factor table in 20 ms, on the slowest shipped airframe',
  run() {
    const slugs = SHIPPED_SLUGS.filter((slug) => SHIPPED[slug].engines.length > 1);
    const solveMs = slugs.map((slug) => {
      const aircraft = prepareAircraft(SHIPPED[slug]);
      const many = () => {
        let sum = 0;
        for (let i = 0; i < SOLVES; i++) {
          const result = minimumControlSpeed(aircraft, { heightM: 10 * i, failed: [i % aircraft.engines.length] });
          if (result.found) sum += result.casMps;
        }
        return sum;
      };
      return medianMs(many) / SOLVES;
    });
    const tableMs = slugs.map((slug) => medianMs(() => controlSpeedFactors(SHIPPED[slug], { heightM: 0 })));
    const [slowestSolve, slowestTable] = [Math.max(...solveMs), Math.max(...tableMs)];
    return {
      value: slowestSolve,
      unit: 'ms',
      ratio: null,
      baseline: 'none',
      goal: '≤ 0.2 ms a solve, ≤ 20 ms a factor table',
      met: slowestSolve <= LONGEST_SOLVE_MS && slowestTable <= LONGEST_TABLE_MS,
      details: [{ label: 'factor table', value: slowestTable, unit: 'ms' }],
    };
  },
});
