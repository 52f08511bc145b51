import { createObservation } from '#shared/model/plant.ts';
import type { Plant } from '#shared/model/plant-types.ts';
import * as X from '#shared/model/state-layout.ts';
import { DEG } from '#shared/units/constants.ts';
import { flying } from '../../unit/model/support/plants.ts';
import { defineBench, measureAllocation, timePair } from '../harness.ts';
import { createKernel } from '../kernels/large-angle-kernel.ts';

const LARGEST_RATIO = 1.5;
/** Bytes per simulated second below which nothing is measurable: one number in ten ticks. */
const NO_GARBAGE_BYTES = 200;
const FLIGHT_S = 10;
const FLIGHTS = 40;
const PEDAL = 0.35;
/** The two integrate the same equations: they may part by this after a flight; rad. */
const SAME_RAD = 1e-4;

/**
 * Left engine of the light twin dead, rudder held: a short flight repeated, so that nothing leaves the envelope. Baseline:
 * the same 14 states in one hand-written function with the same sine and cosine (../kernels/large-angle-kernel.ts).
 */
export default defineBench({
  name: 'step-large-angle',
  claim: 'the shipped stepper costs at most 1.5 times a hand-inlined one, and leaves no garbage',
  run({ note }) {
    const plant = flying('light-twin', { tasKt: 80 });
    plant.failEngine(0, 'windmilling');
    plant.inputs.pedal = PEDAL;
    const start = plant.save();
    const state = plant.x.slice();
    const { aileronRad, rudderRad } = plant.startTrim;
    const rudder = rudderRad - PEDAL * 25 * DEG;
    const { windmillAreaM2 } = plant.aircraft.engines[0];
    const kernel = createKernel(plant.aircraft, {
      aileron: aileronRad,
      rudder,
      path: 0,
      lever: [0, 1],
      dragArea: [windmillAreaM2, 0],
    });
    const x = new Float64Array(14);
    const ticks = FLIGHT_S * 120;

    const subject = (): number => {
      for (let flight = 0; flight < FLIGHTS; flight++) {
        plant.restore(start);
        for (let i = 0; i < ticks; i++) plant.step();
      }
      return plant.x[X.X_PHI];
    };
    const baseline = (): number => {
      for (let flight = 0; flight < FLIGHTS; flight++) {
        x.set(state.subarray(0, 12));
        x[12] = state[X.X_THRUST];
        x[13] = state[X.X_THRUST + 1];
        kernel(x, ticks);
      }
      return x[3];
    };
    const apart = Math.abs(subject() - baseline());
    if (!(apart < SAME_RAD))
      throw new Error(`stepper and kernel part by ${apart} rad: they are not the same equations`);
    note(`stepper and kernel end ${apart.toExponential(1)} rad apart in bank`);

    const { subjectMs, baselineMs, ratio } = timePair(subject, baseline);
    const seconds = FLIGHT_S * FLIGHTS;
    const perSecond = (ms: number): number => (1000 * seconds) / ms;
    plant.restore(start);
    const { bytes, exact } = stepGarbage(plant);
    if (!exact) note('a collection ran while garbage was counted: the bytes are a lower bound');
    return {
      value: perSecond(subjectMs),
      unit: 'simulated s/s',
      ratio,
      baseline: `hand-inlined RK4, ${perSecond(baselineMs).toFixed(0)} simulated s/s`,
      goal: `ratio ≤ ${LARGEST_RATIO}, no garbage`,
      met: ratio <= LARGEST_RATIO && bytes < NO_GARBAGE_BYTES,
      details: [
        { label: 'one step', value: (1000 * subjectMs) / (seconds * 120), unit: 'µs' },
        { label: 'garbage per simulated second', value: bytes, unit: 'B' },
        { label: 'one full observation', value: observationUs(plant), unit: 'µs' },
      ],
    };
  },
});

/** Heap bytes per simulated second of plain stepping, over the second halves of several flights. */
function stepGarbage(plant: Plant): { bytes: number; exact: boolean } {
  const start = plant.save();
  const half = FLIGHT_S / 2;
  const flyHalf = (): void => {
    for (let i = 0; i < half * 120; i++) plant.step();
  };
  const flights = Array.from({ length: 20 }, () => {
    plant.restore(start);
    return measureAllocation(flyHalf);
  });
  const total = flights.reduce((sum, { bytes }) => sum + bytes, 0);
  return { bytes: total / flights.length / half, exact: flights.every(({ exact }) => exact) };
}

function observationUs(plant: Plant): number {
  const out = createObservation(plant.engineCount);
  const count = 20_000;
  for (let i = 0; i < count; i++) plant.observeInto(out);
  const start = performance.now();
  for (let i = 0; i < count; i++) plant.observeInto(out);
  return (1000 * (performance.now() - start)) / count;
}
