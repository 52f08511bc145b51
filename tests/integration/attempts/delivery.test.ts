/** A recording is delivered exactly once, in order, unforged; the server flies it again and its result counts. */
import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { attemptResultSchema, chunkReceiptSchema, startedAttemptSchema } from '#shared/contracts/attempts.ts';
import { problemSchema } from '#shared/contracts/problem.ts';
import { CHUNK_HASH_HEADER } from '#shared/contracts/wire-names.ts';
import { createRecorder, type RecordedChunk } from '#shared/scenario/recording.ts';
import { createRun } from '#shared/scenario/run.ts';
import { allowFlownTime, deliverAttempt, flyAttempt, type FlownAttempt } from '../../support/flown-attempt.ts';
import { addOrganisation } from '../../support/more-organisations.ts';
import { startTestServer, type Client, type TestServer } from '../../support/test-server.ts';

const LEFT_CUT = 'left-engine-cut-after-lift-off';

let server: TestServer;
let trainee: Client;
let other: Client;
beforeAll(async () => {
  server = await startTestServer();
  [trainee, other] = await Promise.all(['j.lindqvist', 'a.bauer'].map((mailbox) => server.client(mailbox)));
});
afterAll(() => server.close());

const put = (
  client: Client,
  attempt: Pick<FlownAttempt, 'id'>,
  chunk: Pick<RecordedChunk, 'index' | 'bytes' | 'hash'>,
) =>
  client('PUT', `/api/attempts/${attempt.id}/chunks/${chunk.index}`, {
    bytes: chunk.bytes,
    headers: { [CHUNK_HASH_HEADER]: chunk.hash },
  });
const stored = async (id: string): Promise<number> => {
  const [row] = await server.sql('SELECT COUNT(*) AS n FROM attempt_chunk WHERE attempt_id = ?', [id]);
  return Number(row['n']);
};
const refusalOf = (answer: { status: number; body: unknown }) => {
  expect(answer.status).toBe(422);
  return problemSchema.parse(answer.body).chunk;
};

describe('chunks', () => {
  it('sent many times at once, from two tabs, are stored once', async () => {
    const attempt = await flyAttempt(server, trainee, LEFT_CUT);
    const [first, second] = attempt.chunks;
    const answers = await Promise.all(Array.from({ length: 8 }, () => put(trainee, attempt, first)));
    expect(answers.map(({ status }) => status)).toEqual(Array.from({ length: 8 }, () => 200));
    expect(chunkReceiptSchema.parse(answers[7].body)).toEqual({ acknowledged: 0, stored: 1 });
    expect(chunkReceiptSchema.parse((await put(trainee, attempt, second)).body)).toEqual({
      acknowledged: 1,
      stored: 2,
    });
    expect(chunkReceiptSchema.parse((await put(trainee, attempt, first)).body)).toEqual({ acknowledged: 0, stored: 2 });
    expect(await stored(attempt.id)).toBe(2);
  });

  it('that are corrupt, forged or out of place are refused with their number; the good ones stay', async () => {
    const attempt = await flyAttempt(server, trainee, LEFT_CUT);
    const [first, second, third] = attempt.chunks;
    expect(refusalOf(await put(trainee, attempt, second))).toMatchObject({
      index: 1,
      reason: 'predecessor-missing',
      expected: 0,
    });
    expect((await put(trainee, attempt, first)).status).toBe(200);
    const bent = second.bytes.slice();
    bent[bent.length >> 1] ^= 1;
    expect(refusalOf(await put(trainee, attempt, { ...second, bytes: bent }))).toMatchObject({
      index: 1,
      reason: 'chain-broken',
    });
    expect(refusalOf(await put(trainee, attempt, { ...third, index: 1 }))).toMatchObject({ index: 1 });
    expect(refusalOf(await put(trainee, attempt, { ...second, index: 0 }))).toMatchObject({
      index: 0,
      reason: 'different-content',
    });
    expect(await stored(attempt.id)).toBe(1);
    expect((await put(trainee, attempt, second)).status).toBe(200);
  });

  it('of another person’s or another organisation’s attempt are not found', async () => {
    const attempt = await flyAttempt(server, trainee, LEFT_CUT);
    await addOrganisation(server, 'trainee', ['trainee', 'instructor']);
    const foreign = await server.client('trainee@elsewhere.example');
    for (const client of [other, foreign]) {
      expect((await put(client, attempt, attempt.chunks[0])).status).toBe(404);
      expect((await client('GET', `/api/attempts/${attempt.id}`)).status).toBe(404);
      expect((await client('GET', `/api/attempts/${attempt.id}/chunks`)).status).toBe(404);
      const complete = { json: { chunkCount: 0, ended: 'left' } };
      expect((await client('POST', `/api/attempts/${attempt.id}/complete`, complete)).status).toBe(404);
    }
    expect((await trainee('GET', '/api/attempts/not-an-id')).status).toBe(404);
    expect(await stored(attempt.id)).toBe(0);
  });

  it('from a clock that runs ahead of the server’s are refused until their time', async () => {
    const answer = await trainee('POST', '/api/attempts', { json: { scenarioSlug: LEFT_CUT } });
    const started = startedAttemptSchema.parse(answer.body);
    const { chunks } = record(started, (fly) => fly(8 * 120));
    let refused: unknown = null;
    for (const chunk of chunks) {
      const reply = await put(trainee, started, chunk);
      if (reply.status !== 200) refused ??= refusalOf(reply);
    }
    // Five seconds of tolerance, and the flight began just now: the sixth or seventh second is too early.
    expect(refused).toMatchObject({ reason: 'ahead-of-clock' });
    expect(await stored(started.id)).toBeLessThan(8);
  });
});

describe('completion', () => {
  it('repeated gives the same result and counts once; nothing is recorded after it', async () => {
    const attempt = await flyAttempt(server, trainee, LEFT_CUT, { delayS: 1 });
    const first = await deliverAttempt(trainee, attempt);
    const again = await trainee('POST', `/api/attempts/${attempt.id}/complete`, {
      json: { chunkCount: attempt.chunks.length, ended: attempt.ended },
    });
    expect(attemptResultSchema.parse(first.body)).toMatchObject({ passed: true, statesAgree: true });
    expect(again.body).toEqual(first.body);
    const late = { index: attempt.chunks.length, bytes: attempt.chunks[0].bytes, hash: attempt.chunks[0].hash };
    expect((await put(trainee, attempt, late)).status).toBe(409);
    const [row] = await server.sql('SELECT COUNT(*) AS n FROM attempt_result WHERE attempt_id = ?', [attempt.id]);
    expect(Number(row['n'])).toBe(1);
  });

  it('with chunks that never came names them', async () => {
    const attempt = await flyAttempt(server, trainee, LEFT_CUT);
    await put(trainee, attempt, attempt.chunks[0]);
    const answer = await trainee('POST', `/api/attempts/${attempt.id}/complete`, {
      json: { chunkCount: 3, ended: 'completed' },
    });
    expect(answer.status).toBe(409);
    expect(problemSchema.parse(answer.body)).toMatchObject({ code: 'chunks-missing', missing: [1, 2] });
  });

  it('of a start asked for twice with one key belongs to one attempt', async () => {
    const json = { scenarioSlug: LEFT_CUT, startKey: randomUUID() };
    const answers = await Promise.all([1, 2, 3].map(() => trainee('POST', '/api/attempts', { json })));
    const ids = new Set(answers.map(({ body }) => startedAttemptSchema.parse(body).id));
    expect(ids.size).toBe(1);
  });
});

type Flying = (ticks: number) => void;
/** Flies a started attempt hands off as `script` says: on for so many ticks, or back to a tick. */
function record(
  started: ReturnType<typeof startedAttemptSchema.parse>,
  script: (fly: Flying, back: (toTick: number) => void) => void,
) {
  const setup = {
    scenario: started.scenario,
    airframe: started.airframe.airframe,
    seed: started.seed,
    drawn: started.drawn,
  };
  let run = createRun(setup);
  const recorder = createRecorder({ attemptKeyHex: started.chunkKey, engineCount: run.plant.engineCount });
  const chunks: RecordedChunk[] = [];
  const keep = (chunk: RecordedChunk | null): void => void (chunk && chunks.push(chunk));
  const sample = run.neutralSample();
  const fly: Flying = (ticks) => {
    for (let i = 0; i < ticks && run.ended === null; i += 1) {
      const { tick } = run;
      run.step(sample);
      recorder.add(sample, tick);
      keep(recorder.takeChunk(run.stateHash()));
    }
  };
  script(fly, (toTick) => {
    recorder.mark({ kind: 'rewind', tick: run.tick, value: toTick });
    keep(recorder.cut(run.stateHash()));
    run = createRun(setup);
    for (let i = 0; i < toTick; i += 1) run.step(sample);
  });
  run.leave();
  keep(recorder.finish(run.stateHash()));
  return { chunks, run };
}

describe('a flight that was rewound', () => {
  it('is flown again by the server on the branch that counts, state for state, and says how often it went back', async () => {
    const answer = await trainee('POST', '/api/attempts', { json: { scenarioSlug: LEFT_CUT } });
    const started = startedAttemptSchema.parse(answer.body);
    const { chunks, run } = record(started, (fly, back) => {
      fly(700);
      back(240);
      fly(500);
    });
    await allowFlownTime(server, started.id);
    const done = await deliverAttempt(trainee, { id: started.id, chunks, ended: 'left', durationTicks: run.tick });
    const result = attemptResultSchema.parse(done.body);
    expect(result).toMatchObject({ statesAgree: true, rewinds: 1, ended: 'left' });
    // Ends where the branch ends: 740 ticks of run time, though 1200 were flown.
    expect(result.durationS).toBeCloseTo(740 / 120, 9);
  });

  it('is refused where the scenario forbids it, and the attempt keeps what came before', async () => {
    const [row] = await server.sql(
      `SELECT r.* FROM scenario_revision r JOIN scenario s ON s.id = r.scenario_id WHERE s.slug = ? LIMIT 1`,
      [LEFT_CUT],
    );
    const { document } = row;
    const strict = Object.assign({}, document, { allow: { freeze: true, slow: false, rewind: false, arrows: true } });
    const id = randomUUID();
    const at = new Date();
    const organisationId = String(row['organisation_id']);
    await server.database.scenarios.insert({ id, organisationId, slug: 'strict-left-cut', at });
    await server.database.scenarios.insertRevision({
      id: randomUUID(),
      organisationId,
      scenarioId: id,
      number: 1,
      status: 'published',
      title: 'Strict',
      summary: '',
      purpose: '',
      durationS: 15,
      criterionCount: 1,
      lanes: [],
      document: strict,
      airframeRevisionId: String(row['airframe_revision_id']),
      note: 'for a test',
      authorId: null,
      at,
    });
    const answer = await trainee('POST', '/api/attempts', { json: { scenarioSlug: 'strict-left-cut' } });
    const started = startedAttemptSchema.parse(answer.body);
    const { chunks } = record(started, (fly, back) => {
      fly(130);
      back(60);
      fly(30);
    });
    await allowFlownTime(server, started.id);
    expect((await put(trainee, started, chunks[0])).status).toBe(200);
    expect(refusalOf(await put(trainee, started, chunks[1]))).toMatchObject({ index: 1, reason: 'not-allowed' });
    expect(await stored(started.id)).toBe(1);
  });
});
