import { z } from 'zod';
import { startedAttemptSchema } from '#shared/contracts/attempts.ts';
import { CHUNK_HASH_HEADER } from '#shared/contracts/wire-names.ts';
import { createRecorder, type RecordedChunk } from '#shared/scenario/recording.ts';
import { createReferencePilot, handsOff } from '#shared/scenario/reference-pilot.ts';
import { createRun } from '#shared/scenario/run.ts';
import type { Client, TestServer } from './test-server.ts';

export interface FlownAttempt {
  id: string;
  chunks: RecordedChunk[];
  ended: string;
  durationTicks: number;
}

/**
 * Starts an attempt through the interface and really flies it; nothing is sent yet. The start is put back in time
 * afterwards, because a minute of flight takes a blink here and the server's clock bounds what may have been flown.
 */
export async function flyAttempt(
  server: Pick<TestServer, 'sql'>,
  client: Client,
  scenarioSlug: string,
  pilot: 'hands-off' | { delayS: number } = 'hands-off',
  body: Record<string, unknown> = {},
): Promise<FlownAttempt> {
  const answer = await client('POST', '/api/attempts', { json: { scenarioSlug, ...body } });
  const started = startedAttemptSchema.parse(answer.body);
  const run = createRun({
    scenario: started.scenario,
    airframe: started.airframe.airframe,
    seed: started.seed,
    drawn: started.drawn,
  });
  const hands = pilot === 'hands-off' ? handsOff() : createReferencePilot(run, pilot.delayS);
  const recorder = createRecorder({ attemptKeyHex: started.chunkKey, engineCount: run.plant.engineCount });
  const chunks: RecordedChunk[] = [];
  const sample = run.neutralSample();
  while (run.ended === null) {
    const tick = run.tick;
    hands.sampleInto(sample);
    run.step(sample);
    if (run.tick === tick) break;
    recorder.add(sample, tick);
    const chunk = recorder.takeChunk(run.stateHash());
    if (chunk) chunks.push(chunk);
  }
  const last = recorder.finish(run.stateHash());
  if (last) chunks.push(last);
  await allowFlownTime(server, started.id);
  return { id: started.id, chunks, ended: run.ended ?? 'left', durationTicks: run.tick };
}

/** Lets an attempt have started an hour ago; its guard trigger is lifted for the change. */
export async function allowFlownTime(server: Pick<TestServer, 'sql'>, id: string): Promise<void> {
  const [row] = await server.sql('SHOW CREATE TRIGGER attempt_keep');
  const statement = z.string().parse(row['SQL Original Statement']);
  await server.sql('DROP TRIGGER attempt_keep');
  await server.sql('UPDATE attempt SET started_at = started_at - INTERVAL 1 HOUR WHERE id = ?', [id]);
  await server.sql(statement);
}

/** Sends all chunks and completes the attempt; returns the answer of the completion. */
export async function deliverAttempt(client: Client, attempt: FlownAttempt) {
  for (const chunk of attempt.chunks) {
    const answer = await client('PUT', `/api/attempts/${attempt.id}/chunks/${chunk.index}`, {
      bytes: chunk.bytes,
      headers: { [CHUNK_HASH_HEADER]: chunk.hash },
    });
    if (answer.status !== 200) throw new Error(`Chunk ${chunk.index}: ${JSON.stringify(answer.body)}`);
  }
  return client('POST', `/api/attempts/${attempt.id}/complete`, {
    json: { chunkCount: attempt.chunks.length, ended: attempt.ended },
  });
}
