import { STREAM_STATE_LENGTH } from '../numerics/random.ts';
import { createPlantEvents } from './plant-events.ts';
import * as D from './plant-memory.ts';
import { createObserver } from './plant-observe.ts';
import { createCore } from './plant-start.ts';
import { commitTick } from './plant-commit.ts';
import { prepareTick, readInputs } from './plant-tick.ts';
import { TICK_S } from './plant-types.ts';
import type { Plant, PlantOptions, PlantSetup } from './plant-types.ts';
import { createWantedSolver } from './plant-wanted.ts';
import { stateName, X_AILERON } from './state-layout.ts';
import { H_CONFIG_HELD } from './tick-held.ts';

export { createObservation } from './observation.ts';
export { createWanted } from './plant-wanted.ts';

/**
 * A flyable aeroplane of one fidelity, trimmed at its start, stepped at 120 Hz.
 *
 * Classical Runge–Kutta on preallocated arrays; nothing is allocated per step. Pilot inputs, turbulence, atmosphere
 * reference, ratio changer and path commands are held over a tick; gusts, wind, feathering and the path target's motion
 * run on inside it. Same setup, inputs and events give the same bits everywhere.
 *
 * @param setup    Airframe, configuration, start, air, automation, seed.
 * @param options  Another integrator for the tick, such as an adaptive one as reference.
 * @returns        The plant at tick 0: ball-centred trim at the given levers, controls centred.
 * @throws {ModelError} unknown-configuration, unknown-loading, wrong-engine-count, singular-trim, trim-beyond-travel,
 *                 no-runway, bad-argument, non-finite-input.
 * @sign           As this folder's README; cockpit inputs right positive.
 * @source         Flight model, sections 3 to 10.
 */
export function createPlant(setup: PlantSetup, options: PlantOptions = {}): Plant {
  const core = createCore(setup);
  const { x, d, h, motion, stream } = core;
  const n = x.length;
  const next = new Float64Array(n);
  const streamState = new Float64Array(STREAM_STATE_LENGTH);
  const { integrate } = options;
  const observe = createObserver(core);
  const wanted = createWantedSolver(core);
  let fault: string | null = null;

  return {
    setup,
    engineCount: core.engineCount,
    inputs: core.inputs,
    x,
    startTrim: core.startTrim,
    get aircraft() {
      return core.configurations[d[D.D_CONFIG]];
    },
    get tick() {
      return d[D.D_TICK];
    },
    get fault() {
      return fault;
    },
    step() {
      if (fault !== null) return false;
      readInputs(core);
      prepareTick(core);
      if (integrate) integrate(next, motion.rhs, x, TICK_S);
      else motion.stepInto(next, x);
      let trouble = 0;
      for (let i = 0; i < n; i++) trouble += 0 * next[i]; // 0 × a number is 0, of anything else NaN
      if (trouble !== 0) {
        fault = faultText(d[D.D_TICK] + 1, next);
        return false;
      }
      for (let i = 0; i < n; i++) x[i] = next[i];
      commitTick(core);
      return true;
    },
    observeInto: observe,
    wantedInto(out, technique = setup.technique) {
      wanted(out, technique);
    },
    derivativeInto(out, state = x) {
      prepareTick(core);
      motion.rhs(out, 0, state);
    },
    ...createPlantEvents(core),
    save() {
      stream.saveInto(streamState, 0);
      streamState.forEach((word, i) => (d[D.D_STREAM + i] = word));
      const { stick, pedal, pitch, rudderTrim, levers, feather } = core.inputs;
      const data = new Float64Array(n + d.length + 4 + 2 * core.engineCount);
      data.set(x);
      data.set(d, n);
      data.set([stick, pedal, pitch, rudderTrim, ...levers, ...feather], n + d.length);
      return { tick: d[D.D_TICK], data };
    },
    restore({ data }) {
      const { inputs } = core;
      const controls = n + d.length;
      x.set(data.subarray(0, n));
      for (let i = 0; i < d.length; i++) d[i] = data[n + i];
      [inputs.stick, inputs.pedal, inputs.pitch, inputs.rudderTrim] = data.subarray(controls, controls + 4);
      inputs.levers.set(data.subarray(controls + 4, controls + 4 + core.engineCount));
      inputs.feather.set(data.subarray(controls + 4 + core.engineCount));
      streamState.set(data.subarray(n + D.D_STREAM, n + D.D_STREAM + STREAM_STATE_LENGTH));
      stream.restoreFrom(streamState, 0);
      h[H_CONFIG_HELD] = -1; // the held configuration is computed afresh
      fault = null;
    },
    hashInto(hash) {
      for (let i = 0; i < n; i++) hash.add(x[i]);
      for (const at of D.HASHED) hash.add(d[at]);
    },
  };
}

/** Names the first state that is not finite, surfaces and thrusts before the motion they would spoil. */
function faultText(tick: number, state: Float64Array): string {
  const broken = (value: number): boolean => !Number.isFinite(value);
  const late = state.subarray(X_AILERON).findIndex(broken);
  const index = late >= 0 ? late + X_AILERON : state.findIndex(broken);
  return `tick ${tick}: the ${stateName(index)} is not finite`;
}
