import { createRun } from '#shared/scenario/run.ts';
import { InputLine } from '#shared/scenario/input-line.ts';
import { openLoadClass, startLoadProduct, type LoadProduct } from '../../load/crowd.ts';
import { ClassClient, play, until } from '../../support/class-client.ts';
import { openClient } from '../../support/test-server.ts';
import { defineBench, median } from '../harness.ts';

/** A minute long, and an aeroplane that stays up with hands off. */
const SCENARIO = 'rudder-ratio-stuck';
const RUNS_BEFORE = 19;
const FLOWN_S = 45;
const JOINERS = ['j.lindqvist', 'a.bauer', 's.chandran', 'h.brandt', 'l.dubois'];
const GOAL_MS = 1000;

/** From the first packet of somebody late to the state of all the others, beside integrating the same inputs and nothing else. */
export default defineBench({
  name: 'join-late',
  claim: `joining a class after ${RUNS_BEFORE} runs, ${FLOWN_S} s into the present one: the same state`,
  async run({ note, cleanUp }) {
    const product = await startLoadProduct(cleanUp);
    const { server } = product;
    const setup = { mode: 'demonstration', seats: 30, scenario: SCENARIO } as const;
    const { pass, instructor } = await openLoadClass(server.address, setup, cleanUp);
    for (let run = 1; run <= RUNS_BEFORE; run += 1) {
      await instructor.control({ deed: 'start', countdownS: 0 });
      await instructor.control({ deed: 'stop' });
    }
    await instructor.control({ deed: 'start', countdownS: 0 });
    await until(() => instructor.state.run?.run === RUNS_BEFORE + 1);
    await instructor.control({ deed: 'inject', event: GUST });
    await putBack(product, pass.classId, instructor.run.attempt ?? '', instructor.state.seq);
    const pilot = new ClassClient(instructor.http, server.address, pass.classId);
    cleanUp(() => pilot.close());
    await pilot.connect();
    const flight = await pilot.takeControls(true);
    await play([pilot], 4000);
    await pilot.delivered(30_000);
    note(`${flight.line.head} ticks flown, ${pilot.state.seq} entries in the log`);

    const times: number[] = [];
    let differed = 0;
    for (const mailbox of JOINERS) {
      const http = await openClient(server.address, mailbox);
      await http('POST', '/api/classes/join', { json: { code: pass.joinCode } });
      const joiner = new ClassClient(http, server.address, pass.classId);
      cleanUp(() => joiner.close());
      const from = performance.now();
      await joiner.connect();
      const follower = await joiner.follow(joiner.run.attempt ?? '');
      // As its screen would: a tenth of a second of work at a time, so that the socket is served between.
      while (follower.advance(joiner.serverNow(), 1500) > 0) await new Promise(setImmediate);
      times.push(performance.now() - from);
      await play([pilot, joiner], 400);
      flight.line.standAt(follower.line.run.tick);
      const same =
        flight.line.run.stateHash() === follower.line.run.stateHash() && follower.line.run.tick > 120 * FLOWN_S;
      if (!same || joiner.differences.length > 0) differed += 1;
      flight.line.standAt(flight.line.head);
      joiner.close();
    }
    const bareMs: number[] = [];
    for (let i = 0; i < 3; i += 1) {
      const line = new InputLine(createRun(await pilot.spec()));
      const sample = line.run.neutralSample();
      for (let tick = 0; tick < flight.line.head; tick += 1) {
        flight.line.sampleInto(sample, tick);
        line.add(sample);
      }
      const from = performance.now();
      line.standAt(flight.line.head);
      bareMs.push(performance.now() - from);
    }
    const value = median(times);
    const bare = median(bareMs);
    return {
      value,
      unit: 'ms',
      ratio: value / bare,
      baseline: `integrating the same ${flight.line.head} ticks and nothing else: ${bare.toFixed(0)} ms`,
      goal: `identical state within ${GOAL_MS} ms`,
      met: value <= GOAL_MS && differed === 0,
      details: [
        { label: 'slowest of five', value: Math.max(...times), unit: 'ms' },
        { label: 'joiners with another state', value: differed, unit: '' },
        { label: 'a run of twenty minutes would take', value: (bare / flight.line.head) * 144, unit: 's' },
      ],
    };
  },
});

const GUST = {
  lane: 'air',
  kind: 'gust',
  axis: 'lateral',
  shape: 'one-minus-cosine',
  from: 'right',
  peak_kt: 8,
  gradientDistance_m: 60,
  at: { time_s: 10 },
};

/** Lets the run have begun earlier; the guards of the log and of attempts are lifted for it, and the server starts afresh. */
async function putBack({ server, sql }: LoadProduct, classId: string, attemptId: string, seq: number): Promise<void> {
  await server.stop();
  await sql('DROP TRIGGER class_entry_keep');
  await sql('DROP TRIGGER attempt_keep');
  await sql(
    `UPDATE class_entry SET body = JSON_SET(body, '$.startMs', CAST(JSON_VALUE(body, '$.startMs') AS SIGNED) - ?)
     WHERE class_id = ? AND kind = 'started' AND seq >= ?`,
    [FLOWN_S * 1000, classId, seq - 1],
  );
  await sql('UPDATE attempt SET started_at = started_at - INTERVAL ? SECOND WHERE id = ?', [FLOWN_S, attemptId]);
  await server.start();
}
