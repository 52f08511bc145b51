/** Dispersion of a scenario over the stated uncertainties of its airframe: seeded draws, each flown by the same pilot. */
import { drawAirframe, uncertainFields } from '../analysis/airframe-sampling.ts';
import type { Airframe } from '../model/airframe-schema.ts';
import { ModelError } from '../model/errors.ts';
import { NumericsError } from '../numerics/errors.ts';
import { createRun } from './run.ts';
import { createReferencePilot, flyRun, handsOff } from './reference-pilot.ts';
import type { DrawnValues } from './run-types.ts';
import type { Scenario } from './scenario-format.ts';

/** A portion of the draws as plain data, for a worker. */
export interface DispersionJob {
  scenario: Scenario;
  airframe: Airframe;
  /** Seed of the draws. */
  seed: number;
  /** Draws from (inclusive) to (exclusive). */
  from: number;
  to: number;
  pilot: 'hands-off' | 'reference';
  delayS: number;
  /** Values of varied events, the same in all draws; drawn from the scenario's seed when absent. */
  drawn?: DrawnValues;
}
export interface DispersionRow {
  draw: number;
  /** Value per criterion in the scenario's order; null when never measured. */
  values: (number | null)[];
  passed: boolean;
  /** Why this draw could not be flown; null when it was. */
  problem: string | null;
}

/** Flies one portion. Pure: the same job gives the same rows wherever it runs. */
export function flyDispersion(job: DispersionJob): DispersionRow[] {
  const fields = uncertainFields(job.airframe);
  const rows: DispersionRow[] = [];
  for (let draw = job.from; draw < job.to; draw++) {
    try {
      const airframe = drawAirframe(job.airframe, fields, job.seed, draw);
      const run = createRun(
        { scenario: job.scenario, airframe, seed: job.scenario.seed, drawn: job.drawn },
        { lean: true },
      );
      flyRun(run, job.pilot === 'reference' ? createReferencePilot(run, job.delayS) : handsOff());
      rows.push({ draw, values: run.results().map((r) => r.value), passed: run.passed(), problem: null });
    } catch (error) {
      if (!(error instanceof ModelError) && !(error instanceof NumericsError)) throw error;
      rows.push({ draw, values: job.scenario.criteria.map(() => null), passed: false, problem: error.message });
    }
  }
  return rows;
}
