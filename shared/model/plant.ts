import type { RightHandSide } from '../numerics/rk4.ts';
import { createPlantEvents } from './plant-events.ts';
import * as D from './plant-memory.ts';
import { createObserver } from './plant-observe.ts';
import { createCore } from './plant-start.ts';
import { commitTick, prepareTick, readInputs } from './plant-tick.ts';
import { TICK_S } from './plant-types.ts';
import type { Plant, PlantOptions, PlantSetup } from './plant-types.ts';
import { createWantedSolver } from './plant-wanted.ts';
import { stateName } from './state-layout.ts';

export { createObservation } from './plant-observe.ts';
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
  const { x, d, rhs, stream } = core;
  const n = x.length;
  const next = new Float64Array(n);
  const integrate = options.integrate ?? createTickStepper(n);
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
      integrate(next, rhs, x, TICK_S);
      let trouble = 0;
      for (let i = 0; i < n; i++) trouble += 0 * next[i];
      if (trouble !== 0) {
        fault = faultText(d[D.D_TICK] + 1, next);
        return false;
      }
      x.set(next);
      commitTick(core);
      return true;
    },
    observeInto: observe,
    wantedInto(out, technique = setup.technique) {
      wanted(out, technique);
    },
    derivativeInto(out, state = x) {
      prepareTick(core);
      rhs(out, 0, state);
    },
    ...createPlantEvents(core),
    save() {
      stream.saveInto(d, D.D_STREAM);
      const data = new Float64Array(n + d.length);
      data.set(x);
      data.set(d, n);
      return { tick: d[D.D_TICK], data };
    },
    restore(snapshot) {
      x.set(snapshot.data.subarray(0, n));
      d.set(snapshot.data.subarray(n));
      stream.restoreFrom(d, D.D_STREAM);
      fault = null;
    },
    hashInto(hash) {
      for (let i = 0; i < n; i++) hash.add(x[i]);
      for (const at of D.HASHED) hash.add(d[at]);
    },
  };
}

function faultText(tick: number, state: Float64Array): string {
  const index = state.findIndex((value) => !Number.isFinite(value));
  return `tick ${tick}: the ${stateName(index)} is not finite`;
}

/** Classical Runge–Kutta over one tick; time counts from its start. */
function createTickStepper(n: number): NonNullable<PlantOptions['integrate']> {
  const k1 = new Float64Array(n);
  const k2 = new Float64Array(n);
  const k3 = new Float64Array(n);
  const k4 = new Float64Array(n);
  const at = new Float64Array(n);
  return (out: Float64Array, f: RightHandSide, x: Float64Array, h: number): void => {
    const half = 0.5 * h;
    f(k1, 0, x);
    for (let i = 0; i < n; i++) at[i] = x[i] + half * k1[i];
    f(k2, half, at);
    for (let i = 0; i < n; i++) at[i] = x[i] + half * k2[i];
    f(k3, half, at);
    for (let i = 0; i < n; i++) at[i] = x[i] + h * k3[i];
    f(k4, h, at);
    const sixth = h / 6;
    for (let i = 0; i < n; i++) out[i] = x[i] + sixth * (k1[i] + 2 * (k2[i] + k3[i]) + k4[i]);
  };
}
