/** What a scenario does hands off and with the reference pilot, and when its waiting events happen. Apart from its worker. */
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import { createReferencePilot, flyRun, handsOff } from '#shared/scenario/reference-pilot.ts';
import { createRun } from '#shared/scenario/run.ts';
import type { CriterionResult, FiredEvent, Run } from '#shared/scenario/run-types.ts';
import type { Scenario } from '#shared/scenario/scenario-schema.ts';
import type { ReferenceRun } from './reference-types.ts';
import { createRunSampler } from './run-sampler.ts';

export interface PreviewQuestion {
  id: number;
  scenario: Scenario;
  airframe: Airframe;
  delayS: number;
}

export interface PreviewRun {
  run: ReferenceRun;
  results: CriterionResult[];
  fired: FiredEvent[];
  warnings: string[];
  deadSide: -1 | 0 | 1;
}

/** When a waiting event fired over the test runs; null where it never did. */
export interface EventWindow {
  id: string;
  firstS: number | null;
  lastS: number | null;
  fired: number;
  runs: number;
}

export type PreviewAnswer =
  | { id: number; part: 'runs'; handsOff: PreviewRun; reference: PreviewRun; warnings: string[] }
  | { id: number; part: 'windows'; windows: EventWindow[] }
  | { id: number; part: 'refused'; message: string };

const FURTHER_SEEDS = 20;

/** Simulated ticks between two places where the work may be given up: some milliseconds. */
const SLICE_TICKS = 15 * TICK_RATE_HZ;

/** A run in slices: pauses at each. */
function* flown({ scenario, airframe, delayS }: PreviewQuestion, reference: boolean): Generator<null, PreviewRun> {
  const run = createRun({ scenario, airframe, seed: scenario.seed }, { unhashed: true });
  const sampler = createRunSampler(run, run.durationTicks);
  const pilot = reference ? createReferencePilot(run, delayS) : handsOff();
  sampler.take();
  while (run.ended === null) {
    const before = run.tick;
    flyRun(run, pilot, before + SLICE_TICKS, sampler.take);
    if (run.tick === before) break;
    yield null;
  }
  return {
    run: sampler.finish(),
    results: run.results(),
    fired: [...run.fired],
    warnings: [...run.warnings],
    deadSide: run.deadSide,
  };
}

/** All answers to a question, the runs first. Where it pauses with null there is nothing to tell yet; who asked may stop. */
export function* previewParts(question: PreviewQuestion): Generator<PreviewAnswer | null, void> {
  const { id, scenario } = question;
  const hands = yield* flown(question, false);
  const reference = yield* flown(question, true);
  const warnings = previewWarnings(scenario, hands, reference);
  yield { id, part: 'runs', handsOff: hands, reference, warnings };
  yield { id, part: 'windows', windows: yield* eventWindows(question) };
}

const passed = ({ results }: PreviewRun): boolean =>
  results.every(({ required, verdict }) => !required || verdict === 'met' || verdict === 'near');

/** What an author should know before publishing; each in one sentence. */
export function previewWarnings(scenario: Scenario, hands: PreviewRun, reference: PreviewRun): string[] {
  const out: string[] = [];
  const required = scenario.criteria.some((criterion) => criterion.required);
  if (required && passed(hands)) out.push('Met hands off: nobody has to do anything to pass.');
  if (required && !passed(reference)) {
    const open = reference.results.filter((r) => r.required && r.verdict !== 'met' && r.verdict !== 'near');
    out.push(`Not met by the reference pilot: ${open.map(({ title }) => title).join(', ')}.`);
  }
  for (const event of scenario.events) {
    const fired = [hands, reference].some((run) => run.fired.some(({ id }) => id === event.id));
    if (!fired) out.push(`Event “${event.id}” never happens in either run.`);
  }
  for (const criterion of scenario.criteria) {
    const reached = [hands, reference].some((run) =>
      run.results.some(({ id, verdict }) => id === criterion.id && verdict !== 'not-reached'),
    );
    if (!reached) out.push(`The window of “${criterion.title}” never opens in either run.`);
  }
  const outside = reference.warnings.find((text) => /outside the data/i.test(text));
  if (outside) out.push(`Reference pilot: ${outside}`);
  return out;
}

/** Spread of the events that wait, over the scenario's own draw and twenty further seeds, flown by the reference pilot. */
function* eventWindows(question: PreviewQuestion): Generator<null, EventWindow[]> {
  const { scenario, airframe, delayS } = question;
  const waiting = scenario.events.filter(({ at, vary }) => !('time_s' in at) || vary !== undefined);
  if (waiting.length === 0) return [];
  const times = new Map<string, number[]>(waiting.map(({ id }) => [id, []]));
  for (let i = 0; i <= FURTHER_SEEDS; i += 1) {
    const run: Run = createRun({ scenario, airframe, seed: scenario.seed + i }, { lean: true });
    flyRun(run, createReferencePilot(run, delayS));
    for (const { id, timeS } of run.fired) times.get(id)?.push(timeS);
    yield null;
  }
  return waiting.map(({ id }) => {
    const found = times.get(id) ?? [];
    const some = found.length > 0;
    return {
      id,
      firstS: some ? Math.min(...found) : null,
      lastS: some ? Math.max(...found) : null,
      fired: found.length,
      runs: FURTHER_SEEDS + 1,
    };
  });
}
