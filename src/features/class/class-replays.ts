/** Attempts of a run integrated again from their chunks, each sampled ten times a second. */
import type { Telemetry } from '#shared/contracts/class-socket.ts';
import type { ClassRunSummary } from '#shared/contracts/classes.ts';
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import { createReplay } from '#shared/scenario/replay.ts';
import { getClassChunks, getClassScenario } from '../../services/classes-api.ts';
import { bytesFromBase64 } from '../replay/chunk-bytes.ts';
import { createTelemetry } from './telemetry.ts';

export interface ReplayLine {
  id: string;
  seat: number;
  name: string;
  /** One a tenth of a second, as the board was told; ascending by tick. */
  samples: readonly Telemetry[];
}

/**
 * Integrates every attempt of a run again.
 *
 * @param made  Called with each attempt as it is done; the page stays alive between them.
 */
export async function replayRun(
  classId: string,
  run: ClassRunSummary,
  made: (line: ReplayLine) => void,
  signal: AbortSignal,
): Promise<void> {
  const { scenario, airframe } = await getClassScenario(classId, run.index);
  for (const attempt of run.attempts) {
    const { chunks } = await getClassChunks(classId, attempt.id);
    if (signal.aborted) return;
    if (chunks.length === 0) continue;
    const replay = createReplay(
      {
        scenario,
        airframe: airframe.airframe,
        seed: run.seed,
        drawn: run.drawn,
        branches: run.branches,
        attemptKeyHex: attempt.chunkKey,
      },
      chunks.map(({ bytesBase64, hash }) => ({ bytes: bytesFromBase64(bytesBase64), hash })),
    );
    const telemetry = createTelemetry();
    const samples: Telemetry[] = [];
    for (let tick = 0; tick <= replay.durationTicks; tick += 1) {
      replay.seek(tick);
      const row = telemetry.tick(replay.run);
      if (row !== null && row.tick > (samples.at(-1)?.tick ?? -1)) samples.push(row);
    }
    made({
      id: attempt.id,
      seat: attempt.seat,
      name: attempt.demonstration ? 'Demonstration' : attempt.name,
      samples,
    });
    await new Promise((resolve) => setTimeout(resolve));
  }
}

/** The sample that holds at a time: the last one not after it, and the end once it is over. */
export function sampleAt({ samples }: ReplayLine, timeS: number): Telemetry | null {
  let low = 0;
  let high = samples.length - 1;
  if (high < 0) return null;
  while (low < high) {
    const middle = Math.ceil((low + high) / 2);
    if (samples[middle].tick <= timeS * TICK_RATE_HZ + 1e-6) low = middle;
    else high = middle - 1;
  }
  return samples[low];
}
