import { compileCondition } from '#shared/scenario/expression/expression.ts';
import { MADE_COUNT, MADE_SIGNAL, STATE_SIGNAL } from '#shared/scenario/expression/names.ts';
import { flyRun, handsOff } from '#shared/scenario/reference-pilot.ts';
import { createRun } from '#shared/scenario/run.ts';
import type { ScenarioDocument } from '#shared/scenario/scenario-schema.ts';
import { cutLeft, specOf } from '../../unit/scenario/support/build-scenario.ts';
import { defineBench, timePair } from '../harness.ts';

const LONGEST_US = 1;
const LARGEST_SLOWING = 0.3;
const EVALUATIONS = 200_000;

/** What instructors write; none comes true in the flight below, so that all are evaluated at every tick. */
const CONDITIONS: ((k: number) => string)[] = [
  (k) => `abs(bank) > ${400 + k} deg and abs(yaw_rate) > 30 deg/s`,
  (k) => `ias < vmc - ${60 + k} kt or ias < stall - 60 kt`,
  (k) => `since(cut) > ${90 + k} s and abs(pedal) < 0.1`,
  (k) => `height < ${100 + k} ft and ias > 300 kt`,
  (k) => `max(abs(roll_rate), abs(yaw_rate)) > ${900 + k} deg/s`,
  (k) => `turned > ${3000 + k} deg or turned < -3000 deg`,
  (k) => `(ball > ${40 + k} widths or ball < -40 widths) and t > 1 s`,
  (k) => `sqrt(stick * stick + pedal * pedal) > 0.9${k}`,
  (k) => `heading > ${370 + k} deg and sideslip > 5 deg`,
  (k) => `abs(rudder) > ${80 + k} deg and abs(aileron) > 80 deg and tas > 10 kt`,
];

const CRITERIA: [ScenarioDocument['criteria'][number]['measure'], string][] = [
  ['heading-deviation', 'deg'],
  ['bank', 'deg'],
  ['bank-dead-side', 'deg'],
  ['sideslip', 'deg'],
  ['yaw-rate', 'deg/s'],
  ['roll-rate', 'deg/s'],
  ['height-loss', 'ft'],
  ['speed-loss', 'kt'],
  ['speed-deviation', 'kt'],
  ['first-correct-pedal', 's'],
];

const base: Partial<ScenarioDocument> = { start: { ias_kt: 95, height_ft: 6000, levers: [1, 1] }, duration_s: 20 };

/** The same cut engine with twenty triggers that wait on conditions and twenty criteria. */
function laden(): Partial<ScenarioDocument> {
  const message = { lane: 'notes', kind: 'message', text: 'Never shown.' } as const;
  const waiting = Array.from({ length: 20 }, (_, i) => ({
    ...message,
    id: `wait-${i}`,
    at: { when: CONDITIONS[i % CONDITIONS.length](i) },
  }));
  const criteria = Array.from({ length: 20 }, (_, i) => {
    const [measure, unit] = CRITERIA[i % CRITERIA.length];
    return { id: `judge-${i}`, title: measure, measure, from: i < 10 ? 'cut' : 'start', limit: { max: 10 + i, unit } };
  });
  return { ...base, events: [cutLeft, ...waiting], criteria };
}

/** Microseconds of one evaluation of a compiled condition, and of the same condition written by hand. */
function evaluation(): { compiled: number; byHand: number } {
  const text = CONDITIONS[0](0);
  const compiled = compileCondition(text);
  if (!compiled.ok) throw new Error(compiled.problem.message);
  const { holds } = compiled.condition;
  const inputs = { x: new Float64Array(16), v: new Float64Array(MADE_COUNT), sinceS: () => 5 };
  const degrees = Math.PI / 180;
  const written = ({ x }: typeof inputs): boolean =>
    Math.abs(x[STATE_SIGNAL.phiRad]) > 400 * degrees && Math.abs(x[STATE_SIGNAL.rRadS]) > 30 * degrees;
  const loop = (test: (x: typeof inputs) => boolean) => (): number => {
    let count = 0;
    for (let i = 0; i < EVALUATIONS; i++) {
      inputs.x[STATE_SIGNAL.phiRad] = i * 1e-4;
      inputs.x[STATE_SIGNAL.rRadS] = i * 1e-6;
      inputs.v[MADE_SIGNAL.timeS] = i;
      if (test(inputs)) count++;
    }
    return count;
  };
  const timing = timePair(loop(holds), loop(written));
  const us = (ms: number): number => (1000 * ms) / EVALUATIONS;
  return { compiled: us(timing.subjectMs), byHand: us(timing.baselineMs) };
}

/** Twenty triggers and twenty criteria on a run, against the same run without. */
export default defineBench({
  name: 'expression',
  claim:
    'a compiled trigger costs a microsecond a tick at most; twenty triggers and twenty criteria slow a run by 30 %',
  run({ note }) {
    const heavy = specOf(laden());
    const light = specOf({ ...base, events: [cutLeft] });
    const fly = (spec: typeof heavy, lean: boolean) => (): number =>
      flyRun(createRun(spec, { lean }), handsOff()).plant.x[0];
    const probe = flyRun(createRun(heavy), handsOff());
    if (probe.tick !== 2400 || probe.fired.length !== 1)
      throw new Error('a trigger fired, or the flight was not whole');
    note(`${probe.results().filter(({ value }) => value !== null).length} criteria with a value`);
    const asFlown = timePair(fly(heavy, false), fly(light, false), { rounds: 41, warmUp: 20 });
    const lean = timePair(fly(heavy, true), fly(light, true), { rounds: 41, warmUp: 20 });
    const ticks = probe.tick;
    const trigger = triggerUs(ticks);
    const { compiled, byHand } = evaluation();
    return {
      value: trigger,
      unit: 'µs a trigger and tick',
      ratio: asFlown.ratio,
      baseline: `the same run with neither: ${asFlown.baselineMs.toFixed(1)} ms for ${ticks / 120} s`,
      goal: `≤ ${LONGEST_US} µs; ratio ≤ ${1 + LARGEST_SLOWING}`,
      met: trigger <= LONGEST_US && asFlown.ratio <= 1 + LARGEST_SLOWING,
      details: [
        { label: 'one condition evaluated alone', value: compiled, unit: 'µs' },
        { label: 'the same condition by hand', value: byHand, unit: 'µs' },
        { label: 'slowing of a lean run, as searches fly it', value: 100 * (lean.ratio - 1), unit: '%' },
        { label: 'slowing of a run as it is flown', value: 100 * (asFlown.ratio - 1), unit: '%' },
      ],
    };
  },
});

/** What each of twenty waiting triggers adds to a tick of a run without criteria. */
function triggerUs(ticks: number): number {
  const { events } = laden();
  const waiting = specOf({ ...base, events });
  const none = specOf({ ...base, events: [cutLeft] });
  const fly = (spec: typeof none) => (): number => flyRun(createRun(spec), handsOff()).plant.x[0];
  const timing = timePair(fly(waiting), fly(none), { rounds: 41, warmUp: 20 });
  return Math.max(0, (1000 * (timing.subjectMs - timing.baselineMs)) / ticks / 20);
}
