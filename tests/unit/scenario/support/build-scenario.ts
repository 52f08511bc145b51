/** Scenarios and airframes for tests, parsed as any file would be. */
import { readFileSync } from 'node:fs';
import { parseAirframe } from '#shared/model/airframe-schema.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { createRun } from '#shared/scenario/run.ts';
import type { ControlSample, Run, RunSpec } from '#shared/scenario/run-types.ts';
import { parseScenario } from '#shared/scenario/scenario-schema.ts';
import type { Scenario, ScenarioDocument } from '#shared/scenario/scenario-schema.ts';

const root = new URL('../../../../', import.meta.url);

/** Parsed JSON of a file of the project. */
export function jsonOf(path: string): unknown {
  const value: unknown = JSON.parse(readFileSync(new URL(path, root), 'utf8'));
  return value;
}

export function airframeOf(slug: string): Airframe {
  const parsed = parseAirframe(jsonOf(`scenarios/airframes/${slug}.json`));
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.issues));
  return parsed.airframe;
}

/** A document with little in it: a light twin at 100 kt and 2,000 ft, both levers full. */
export function documentOf(over: Partial<ScenarioDocument> = {}): ScenarioDocument {
  return {
    format: 'sidewash.scenario/1',
    title: 'Test',
    airframe: { slug: 'light-twin', revision: 1 },
    start: { ias_kt: 100, height_ft: 2000, levers: [1, 1] },
    duration_s: 10,
    events: [],
    criteria: [],
    ...over,
  };
}

export function scenarioOf(over: Partial<ScenarioDocument> = {}): Scenario {
  const parsed = parseScenario(documentOf(over));
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.issues));
  return parsed.scenario;
}

export function shippedScenario(slug: string): Scenario {
  const parsed = parseScenario(jsonOf(`scenarios/${slug}.json`));
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.issues));
  return parsed.scenario;
}

export function specOf(over: Partial<ScenarioDocument> = {}, airframe: Airframe = airframeOf('light-twin')): RunSpec {
  const scenario = scenarioOf(over);
  return { scenario, airframe, seed: scenario.seed };
}

export function runOf(over: Partial<ScenarioDocument> = {}, airframe?: Airframe): Run {
  return createRun(specOf(over, airframe));
}

/** Flies to a tick or to the end; `input` changes the neutral sample of each tick. */
export function fly(run: Run, toTick = Infinity, input?: (sample: ControlSample, tick: number) => void): Run {
  const sample = run.neutralSample();
  while (run.ended === null && run.tick < toTick) {
    input?.(sample, run.tick);
    run.step(sample);
  }
  return run;
}

export const cutLeft = {
  id: 'cut',
  lane: 'engines',
  kind: 'engine-failure',
  engine: 'left',
  at: { time_s: 1 },
} as const;
