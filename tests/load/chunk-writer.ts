import { createRecorder, type RecordedChunk } from '#shared/scenario/recording.ts';
import type { ControlSample } from '#shared/scenario/run-types.ts';
import type { AttemptHold } from '#shared/contracts/class-socket.ts';

/** Chunks that follow from one another, of controls that move and states that nobody integrated: for load alone. */
export function createChunkWriter(hold: AttemptHold, engineCount: number): () => RecordedChunk {
  const recorder = createRecorder({ attemptKeyHex: hold.chunkKey, engineCount });
  const sample: ControlSample = {
    stick: 0,
    pedal: 0,
    pitch: 0,
    rudderTrim: 0,
    levers: new Int16Array(engineCount).fill(20_000),
    feather: new Uint8Array(engineCount),
  };
  let tick = 0;
  return () => {
    for (let i = 0; i < 120; i += 1) {
      sample.pedal = 50 * (tick % 300);
      sample.stick = 20 * (tick % 170);
      recorder.add(sample, tick);
      tick += 1;
    }
    const chunk = recorder.takeChunk('00000000000000aa');
    if (chunk === null) throw new Error('A second makes a chunk.');
    return chunk;
  };
}
