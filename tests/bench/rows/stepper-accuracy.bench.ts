import { readdirSync } from 'node:fs';
import path from 'node:path';
import * as X from '#shared/model/state-layout.ts';
import { integrateAdaptive } from '#shared/numerics/odex-adapter.ts';
import { createReferencePilot, DEFAULT_DELAY_S, handsOff } from '#shared/scenario/reference-pilot.ts';
import { createRun } from '#shared/scenario/run.ts';
import type { RunOptions } from '#shared/scenario/run-types.ts';
import { DEG } from '#shared/units/constants.ts';
import { projectFolder } from '../../../server/config/project-folder.ts';
import { airframeOf, shippedScenario } from '../../unit/scenario/support/build-scenario.ts';
import { defineBench } from '../harness.ts';

const BOUND = 1e-5;
const TOLERANCE = 1e-10;
const STEEPEST_RAD = 60 * DEG;
/** A path that is held level gives nothing to divide by: the smallest scale of the path's pitch. */
const LEAST_PITCH_RAD = 1 * DEG;
const MOTION = [X.X_BETA, X.X_P, X.X_R, X.X_PHI, X.X_THETA, X.X_PSI, X.X_V];
const STATES = ['sideslip', 'roll rate', 'yaw rate', 'bank', 'path pitch', 'heading', 'airspeed'];

interface Parted {
  /** Largest max|Δx|/max|x| over the motion states, and the state it is of. */
  error: number;
  state: string;
  ticks: number;
  stepperMs: number;
  adaptiveMs: number;
}

const adaptive: RunOptions['integrate'] = (out, rhs, x, stepS) => {
  out.set(integrateAdaptive(rhs, x, 0, stepS, { tolerance: TOLERANCE }).x);
};

/** Flies a scenario twice with the very same inputs, while the bank stays below 60°. */
function compare(slug: string, flown: 'hands off' | 'reference pilot'): Parted {
  const scenario = shippedScenario(slug);
  const spec = { scenario, airframe: airframeOf(scenario.airframe.slug), seed: scenario.seed };
  const run = createRun(spec, { lean: true });
  const reference = createRun(spec, { lean: true, integrate: adaptive });
  const pilot = flown === 'hands off' ? handsOff() : createReferencePilot(run, DEFAULT_DELAY_S);
  const sample = run.neutralSample();
  const largest = new Float64Array(MOTION.length);
  const apart = new Float64Array(MOTION.length);
  let [stepperMs, adaptiveMs] = [0, 0];
  while (run.ended === null && reference.ended === null) {
    pilot.sampleInto(sample);
    const from = performance.now();
    run.step(sample);
    const between = performance.now();
    reference.step(sample);
    adaptiveMs += performance.now() - between;
    stepperMs += between - from;
    if (Math.abs(run.plant.x[X.X_PHI]) >= STEEPEST_RAD) break;
    MOTION.forEach((state, i) => {
      largest[i] = Math.max(largest[i], Math.abs(reference.plant.x[state]));
      apart[i] = Math.max(apart[i], Math.abs(run.plant.x[state] - reference.plant.x[state]));
    });
  }
  const errors = apart.map((difference, i) =>
    difference === 0 ? 0 : difference / (MOTION[i] === X.X_THETA ? Math.max(largest[i], LEAST_PITCH_RAD) : largest[i]),
  );
  const error = Math.max(...errors);
  return { error, state: STATES[errors.indexOf(error)], ticks: run.tick, stepperMs, adaptiveMs };
}

/** The stepper beside the adaptive integrator on every shipped scenario, tick for tick. */
export default defineBench({
  name: 'stepper-accuracy',
  claim: `Runge–Kutta at 120 Hz beside odex at ${TOLERANCE} over every shipped scenario, while the bank is below 60°`,
  run({ note }) {
    const slugs = readdirSync(path.join(projectFolder, 'scenarios'))
      .filter((file) => file.endsWith('.json'))
      .map((file) => file.slice(0, -'.json'.length));
    const all = slugs.flatMap((slug) =>
      (['hands off', 'reference pilot'] as const).map((flown) => ({ slug, flown, ...compare(slug, flown) })),
    );
    const sum = (of: (one: Parted) => number): number => all.reduce((total, one) => total + of(one), 0);
    const worst = all.toSorted((a, b) => b.error - a.error);
    const ticks = sum((one) => one.ticks);
    note(`${slugs.length} scenarios, ${all.length} flights, ${(ticks / 120).toFixed(0)} s`);
    const { error } = worst[0];
    return {
      value: error,
      unit: 'of the largest value',
      ratio: sum(({ stepperMs }) => stepperMs) / sum(({ adaptiveMs }) => adaptiveMs),
      baseline: `time of odex at ${TOLERANCE}: ${((sum(({ adaptiveMs }) => adaptiveMs) * 1000) / ticks).toFixed(0)} µs a tick`,
      goal: `≤ ${BOUND.toExponential(0)}`,
      met: error <= BOUND,
      details: [
        ...worst.slice(0, 5).map(({ slug, flown, state, error: value }) => ({
          label: `${slug}, ${flown}, ${state}`,
          value,
          unit: '',
        })),
        { label: 'flights within the bound', value: all.filter((one) => one.error <= BOUND).length, unit: '' },
      ],
    };
  },
});
