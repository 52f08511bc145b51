import { z } from 'zod';
import {
  attemptResultSchema,
  criterionResultSchema,
  drawnValuesSchema,
  hash16Schema,
  injectedBranchesSchema,
  stripSchema,
  type AttemptStrip,
} from '#shared/contracts/attempts.ts';
import { verdictSchema } from '#shared/contracts/scenarios.ts';
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import { openRecording, RecordingPlayer } from '#shared/scenario/recording.ts';
import { createRun } from '#shared/scenario/run.ts';
import { MODEL_VERSION, type CriterionResult, type Verdict } from '#shared/scenario/run-types.ts';
import { DEG } from '#shared/units/constants.ts';
import { createReaction, zeroTick } from './reaction.ts';
import { storedAirframe, storedScenario } from './attempt-data.ts';

/** What a worker is handed to integrate a recording again: documents and bytes, nothing parsed. */
export const rerunJobSchema = z.object({
  scenario: z.unknown(),
  airframe: z.unknown(),
  seed: z.number().int().min(0),
  drawn: drawnValuesSchema,
  chunkKey: hash16Schema,
  chunks: z.array(z.object({ hash: hash16Schema, bytes: z.instanceof(Uint8Array) })),
  branches: injectedBranchesSchema.optional(),
});
export type RerunJob = z.infer<typeof rerunJobSchema>;

export const rerunResultSchema = attemptResultSchema.omit({ computedAt: true }).extend({
  verdict: verdictSchema.nullable(),
  worst: z.object({ title: z.string(), margin: z.number(), unit: z.string() }).nullable(),
  strip: stripSchema,
  /** From the first event to the first correct pedal; null when there was none. */
  firstPedalS: z.number().nullable(),
  criteria: z.array(criterionResultSchema),
});
export type RerunResult = z.infer<typeof rerunResultSchema>;

/** Every so many ticks one point of the thumbnail's trace: four a second, thinned further in long runs. */
const STRIP_TICKS = 30;
const STRIP_POINTS = 160;
const ORDER: readonly Verdict[] = ['met', 'near', 'not-reached', 'not-met'];

/** Integrates a recording again and judges it: the result that counts. Throws when it cannot be integrated. */
export function resultOfRun(job: RerunJob): RerunResult {
  const run = createRun({
    scenario: storedScenario(job.scenario),
    airframe: storedAirframe(job.airframe),
    seed: job.seed,
    drawn: job.drawn,
    branches: job.branches,
  });
  const betaDeg: number[] = [run.now.betaRad / DEG];
  const reaction = createReaction();
  const player = new RecordingPlayer(run, (now) => {
    reaction.see(now, zeroTick(now));
    if (now.tick % STRIP_TICKS !== 0) return;
    const place = now.tick / STRIP_TICKS;
    betaDeg.length = place;
    betaDeg.push(Number((now.now.betaRad / DEG).toFixed(2)));
  });
  let firstDifferenceTick: number | null = null;
  const chunks = job.chunks.map((chunk) => ({ hash: chunk.hash, bytes: new Uint8Array(chunk.bytes) }));
  let rewinds = 0;
  for (const content of openRecording(chunks, job.chunkKey, run.plant.engineCount)) {
    rewinds += content.marks.filter(({ kind }) => kind === 'rewind').length;
    if (player.play(content) === false) firstDifferenceTick ??= content.startTick + content.tickCount;
  }
  if (run.ended === null) run.leave();
  const criteria = run.results();
  const zero = zeroTick(run);
  const { firstPedalS } = reaction.result();
  return {
    ended: run.ended ?? 'left',
    durationS: run.tick / TICK_RATE_HZ,
    criteria,
    passed: run.passed(),
    stateHash: run.stateHash(),
    statesAgree: firstDifferenceTick === null,
    firstDifferenceTick,
    rewinds,
    modelVersion: MODEL_VERSION,
    verdict: worstVerdict(criteria),
    worst: leastMargin(criteria),
    strip: thinned(betaDeg),
    firstPedalS: firstPedalS === null || zero === null ? null : firstPedalS - zero / TICK_RATE_HZ,
  };
}

function worstVerdict(criteria: readonly CriterionResult[]): Verdict | null {
  return criteria
    .filter((c) => c.required)
    .reduce<Verdict | null>(
      (worst, c) => (worst === null || ORDER.indexOf(c.verdict) > ORDER.indexOf(worst) ? c.verdict : worst),
      null,
    );
}

/** The criterion with the smallest margin relative to the size of its limit, among the required ones where there are any. */
function leastMargin(criteria: readonly CriterionResult[]): RerunResult['worst'] {
  let least: { share: number; worst: NonNullable<RerunResult['worst']> } | null = null;
  const required = criteria.filter((c) => c.required && c.margin !== null);
  for (const c of required.length > 0 ? required : criteria) {
    if (c.margin === null) continue;
    const { max, min, within, unit } = c.limit;
    const size = Math.abs(max ?? min ?? (within ? within[1] - within[0] : 1)) || 1;
    const share = c.margin / size;
    if (least === null || share < least.share) least = { share, worst: { title: c.title, margin: c.margin, unit } };
  }
  return least?.worst ?? null;
}

function thinned(betaDeg: readonly number[]): AttemptStrip {
  const step = Math.max(1, Math.ceil(betaDeg.length / STRIP_POINTS));
  const tS: number[] = [];
  const kept: number[] = [];
  for (let i = 0; i < betaDeg.length; i += step) {
    tS.push((i * STRIP_TICKS) / TICK_RATE_HZ);
    kept.push(betaDeg[i]);
  }
  return { tS, betaDeg: kept };
}
