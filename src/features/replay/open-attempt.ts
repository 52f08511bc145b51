import type { AttemptDetail } from '#shared/contracts/attempts.ts';
import { type Replay, createReplay } from '#shared/scenario/replay.ts';
import { getAttempt, getAttemptChunks } from '../../services/attempts-api.ts';
import { bytesFromBase64 } from './chunk-bytes.ts';

export interface OpenedAttempt {
  detail: AttemptDetail;
  /** Null when nothing of the flight has arrived. */
  replay: Replay | null;
}

/** Fetches an attempt and integrates it again from its chunks. */
export async function openAttempt(id: string, signal: AbortSignal): Promise<OpenedAttempt> {
  const [detail, { chunks }] = await Promise.all([getAttempt(id, signal), getAttemptChunks(id, signal)]);
  if (chunks.length === 0) return { detail, replay: null };
  const replay = createReplay(
    {
      scenario: detail.scenario,
      airframe: detail.airframe.airframe,
      seed: detail.seed,
      drawn: detail.drawn,
      branches: detail.liveClass?.branches,
      attemptKeyHex: detail.chunkKey,
      ...(detail.liveClass && { branches: detail.liveClass.branches }),
    },
    chunks.map((chunk) => ({ hash: chunk.hash, bytes: bytesFromBase64(chunk.bytesBase64) })),
  );
  return { detail, replay };
}
