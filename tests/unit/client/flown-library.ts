/** A small library and one flown attempt for page tests: the shipped files, a real run hands off, real chunks. */
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { AttemptDetail, AttemptSummary } from '#shared/contracts/attempts.ts';
import type { ScenarioRevision, ScenarioSummary } from '#shared/contracts/scenarios.ts';
import { parseAirframe } from '#shared/model/airframe-schema.ts';
import { createRecorder, type RecordedChunk } from '#shared/scenario/recording.ts';
import { createRun } from '#shared/scenario/run.ts';
import { parseScenario } from '#shared/scenario/scenario-schema.ts';

const read = (name: string): unknown =>
  JSON.parse(readFileSync(join(import.meta.dirname, '../../../scenarios', `${name}.json`), 'utf8'));

const SLUG = 'left-engine-cut-after-lift-off';
const KEY = '0123456789abcdef';
const SEED = 7;
const ATTEMPT = '10000000-0000-4000-8000-000000000001';
const WHEN = '2026-06-03T12:20:00.000Z';

export function flownLibrary() {
  const parsedAirframe = parseAirframe(read('airframes/light-twin'));
  const parsedScenario = parseScenario(read(SLUG));
  if (!parsedAirframe.ok || !parsedScenario.ok) throw new Error('a shipped file does not parse');
  const { airframe } = parsedAirframe;
  const { scenario } = parsedScenario;

  const run = createRun({ scenario, airframe, seed: SEED });
  const recorder = createRecorder({ attemptKeyHex: KEY, engineCount: run.plant.engineCount });
  const hands = run.neutralSample();
  const chunks: RecordedChunk[] = [];
  const strip = { tS: new Array<number>(), betaDeg: new Array<number>() };
  const keep = (chunk: RecordedChunk | null): void => void (chunk && chunks.push(chunk));
  while (run.ended === null) {
    recorder.add(hands, run.tick);
    run.step(hands);
    keep(recorder.takeChunk(run.stateHash()));
    if (run.tick % 24 === 0) {
      strip.tS.push(run.timeS);
      strip.betaDeg.push((run.now.betaRad * 180) / Math.PI);
    }
  }
  keep(recorder.finish(run.stateHash()));

  const pinned = { slug: 'light-twin', revision: 1, airframe };
  const summary: ScenarioSummary = {
    slug: SLUG,
    title: scenario.title,
    summary: scenario.summary,
    purpose: scenario.purpose,
    airframeSlug: 'light-twin',
    airframeRevision: 1,
    airframeName: airframe.name,
    revision: 1,
    status: 'published',
    durationS: scenario.duration_s,
    criteria: scenario.criteria.length,
    lanes: [{ lane: 'engines', kind: 'engine-failure', atS: 3 }],
    updatedAt: WHEN,
    attempts: { mine: 1, lastVerdict: 'not-met' },
  };
  const revision: ScenarioRevision = {
    slug: SLUG,
    revision: 1,
    latest: true,
    status: 'published',
    note: '',
    createdBy: null,
    createdAt: WHEN,
    publishedAt: WHEN,
    scenario,
    airframe: pinned,
  };
  const attempt: AttemptSummary = {
    id: ATTEMPT,
    scenarioSlug: SLUG,
    scenarioTitle: scenario.title,
    scenarioRevision: 1,
    airframeName: airframe.name,
    number: 1,
    startedAt: WHEN,
    status: 'complete',
    ended: run.ended,
    durationS: run.timeS,
    passed: run.passed(),
    verdict: 'not-met',
    worst: null,
    strip,
  };
  const detail: AttemptDetail = {
    ...attempt,
    person: { id: '00000000-0000-4000-8000-000000000001', displayName: 'J. Lindqvist' },
    seed: SEED,
    drawn: run.drawn,
    chunkKey: KEY,
    modelVersion: '1.0.0',
    storedChunks: chunks.length,
    completedAt: WHEN,
    scenario,
    airframe: pinned,
    result: {
      ended: run.ended,
      durationS: run.timeS,
      criteria: run.results(),
      passed: run.passed(),
      stateHash: run.stateHash(),
      statesAgree: true,
      firstDifferenceTick: null,
      rewinds: 0,
      modelVersion: '1.0.0',
      computedAt: WHEN,
    },
  };
  return {
    summary,
    revision,
    attempt,
    detail,
    chunks: {
      chunks: chunks.map(({ index, startTick, tickCount, hash, bytes }) => ({
        index,
        startTick,
        tickCount,
        hash,
        bytesBase64: Buffer.from(bytes).toString('base64'),
      })),
    },
  };
}
