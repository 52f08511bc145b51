/** Integrates an attempt again from its chunks and takes the balance two seconds after its first event. */
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import { createReplay } from '#shared/scenario/replay.ts';
import { instantVerdict } from '../../components/instruments/balance-verdict.ts';
import { zeroEvent } from '../../features/fly/flight-log.ts';
import { bytesFromBase64 } from '../../features/replay/chunk-bytes.ts';
import { balanceOf, blankWanted } from '../../features/replay/survey.ts';
import { getAttempt, getAttemptChunks } from '../../services/attempts-api.ts';
import type { ReplayMoment } from './replay-moment.ts';

/** When after the first event the strip of the list is taken. */
const AFTER_EVENT_TICKS = 2 * TICK_RATE_HZ;

/** Null when nothing was recorded. */
export async function loadMoment(attemptId: string, signal: AbortSignal): Promise<ReplayMoment | null> {
  const [attempt, { chunks }] = await Promise.all([getAttempt(attemptId, signal), getAttemptChunks(attemptId, signal)]);
  if (chunks.length === 0) return null;
  const replay = createReplay(
    {
      scenario: attempt.scenario,
      airframe: attempt.airframe.airframe,
      seed: attempt.seed,
      drawn: attempt.drawn,
      branches: attempt.liveClass?.branches,
      attemptKeyHex: attempt.chunkKey,
    },
    chunks.map((chunk) => ({ hash: chunk.hash, bytes: bytesFromBase64(chunk.bytesBase64) })),
  );
  const event = zeroEvent(replay.fired);
  const from = event?.tick ?? 0;
  const at = Math.min(replay.durationTicks, from + AFTER_EVENT_TICKS);
  replay.seek(at);
  const now = balanceOf(replay.observation);
  const wanted = blankWanted();
  replay.run.wantedInto(wanted);
  const { deadSide } = replay.run;
  return {
    attemptId,
    now,
    wanted,
    deadSide,
    verdict: instantVerdict(now, wanted, deadSide),
    eventS: event?.timeS ?? null,
    sinceS: (at - from) / TICK_RATE_HZ,
  };
}
