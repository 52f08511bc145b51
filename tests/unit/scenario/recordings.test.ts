import { readFileSync, writeFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { createStream } from '#shared/numerics/random.ts';
import { createRecorder, decodeChunk, rerun, verifyChain } from '#shared/scenario/recording.ts';
import type { RecordedChunk } from '#shared/scenario/recording.ts';
import { createReplay } from '#shared/scenario/replay.ts';
import { createRun } from '#shared/scenario/run.ts';
import { MODEL_VERSION } from '#shared/scenario/run-types.ts';
import type { ControlSample, Run, RunSpec } from '#shared/scenario/run-types.ts';
import { airframeOf, cutLeft, fly, shippedScenario, specOf } from './support/build-scenario.ts';

const KEY = '00112233445566aa';
const spec = specOf({
  events: [cutLeft, { id: 'rough', lane: 'air', kind: 'turbulence', level: 'light', at: { time_s: 2 } }],
  duration_s: 8.5,
});

/** A restless pilot whose inputs repeat from the tick alone. */
function restless(sample: ControlSample, tick: number): void {
  sample.pedal = tick < 200 ? 0 : 14000 + ((tick * 37) % 500);
  sample.stick = tick % 50 < 25 ? 3000 : -500;
  sample.levers[1] = tick > 500 ? 28000 : 32767;
  sample.feather[0] = tick > 300 ? 1 : 0;
  sample.rudderTrim = tick > 600 ? -2000 : 0;
}

interface Flown {
  run: Run;
  chunks: RecordedChunk[];
}

/** Records a flight; `rewind` goes back from one tick to another once. */
function record(
  of: RunSpec,
  input: (sample: ControlSample, tick: number) => void,
  rewind?: { at: number; to: number },
  key = KEY,
): Flown {
  const run = createRun(of);
  const recorder = createRecorder({ attemptKeyHex: key, engineCount: run.plant.engineCount });
  const chunks: RecordedChunk[] = [];
  const keep = (chunk: RecordedChunk | null): void => {
    if (chunk) chunks.push(chunk);
  };
  const sample = run.neutralSample();
  let back = rewind;
  let goal: ReturnType<Run['save']> | null = null;
  while (run.ended === null) {
    const { tick } = run;
    if (back && tick === back.to) goal ??= run.save();
    if (back && tick === back.at && goal) {
      recorder.mark({ kind: 'rewind', tick, value: back.to });
      keep(recorder.cut(run.stateHash()));
      run.restore(goal);
      back = undefined;
      continue;
    }
    input(sample, tick + (rewind && !back ? 10_000 : 0));
    run.step(sample);
    recorder.add(sample, tick);
    keep(recorder.takeChunk(run.stateHash()));
  }
  keep(recorder.finish(run.stateHash()));
  return { run, chunks };
}

const flown = record(spec, restless);

describe('a recording', () => {
  it('holds a second in each chunk and comes back as it was flown', () => {
    expect(flown.chunks.map(({ tickCount }) => tickCount)).toEqual([...Array.from({ length: 8 }, () => 120), 60]);
    expect(flown.chunks.map(({ startTick }) => startTick)).toEqual([0, 120, 240, 360, 480, 600, 720, 840, 960]);
    const wanted = flown.run.neutralSample();
    let tick = 0;
    for (const chunk of flown.chunks) {
      const decoded = decodeChunk(chunk.bytes, 2);
      if (!decoded.ok) throw new Error(decoded.reason);
      for (let i = 0; i < decoded.content.tickCount; i++, tick++) {
        restless(wanted, tick);
        expect(decoded.content.channels.map((channel) => channel[i])).toEqual([
          wanted.stick,
          wanted.pedal,
          wanted.pitch,
          wanted.rudderTrim,
          ...wanted.levers,
          ...wanted.feather,
        ]);
      }
    }
  });

  it('costs a few dozen bytes a second while nothing moves', () => {
    const still = record(specOf({ duration_s: 3 }), () => undefined);
    for (const { bytes } of still.chunks.slice(1)) expect(bytes.length).toBeLessThan(70);
  });

  it('takes wild inputs and random bits unchanged (seed 42)', () => {
    const stream = createStream(42, 'inputs');
    const full = (): number => Math.round((2 * stream.uniform() - 1) * 32767);
    const inputs: number[][] = [];
    const wild = record(specOf({ duration_s: 1 }), (sample) => {
      [sample.stick, sample.pedal, sample.pitch, sample.rudderTrim] = [full(), full(), full(), full()];
      sample.levers[0] = Math.abs(full());
      sample.feather[1] = stream.uniform() > 0.5 ? 1 : 0;
      inputs.push([sample.stick, sample.pedal, sample.pitch, sample.rudderTrim, ...sample.levers, ...sample.feather]);
    });
    const decoded = decodeChunk(wild.chunks[0].bytes, 2);
    expect(decoded.ok && inputs.map((_, i) => decoded.content.channels.map((channel) => channel[i]))).toEqual(inputs);
  });

  it('integrated again gives the same states, events and results', () => {
    const again = rerun({ ...spec, attemptKeyHex: KEY }, flown.chunks);
    expect([again.stateHashesAgree, again.firstDifferenceTick]).toEqual([true, null]);
    expect(again.run.stateHash()).toBe(flown.run.stateHash());
    expect(again.run.fired).toEqual(flown.run.fired);
    expect(again.run.results()).toEqual(flown.run.results());
    expect(again.run.ended).toBe('completed');
  });

  it('with a rewind flies the branch that counted', () => {
    const branched = record(spec, restless, { at: 505, to: 290 });
    const straight = createRun(spec);
    fly(straight, 290, restless);
    fly(straight, Infinity, (sample, tick) => restless(sample, tick + 10_000));
    expect(branched.run.stateHash()).toBe(straight.stateHash());
    const again = rerun({ ...spec, attemptKeyHex: KEY }, branched.chunks);
    expect([again.stateHashesAgree, again.run.stateHash()]).toEqual([true, straight.stateHash()]);
    const replay = createReplay({ ...spec, attemptKeyHex: KEY }, branched.chunks);
    expect([replay.durationTicks, replay.agrees]).toEqual([straight.tick, true]);
    replay.seek(straight.tick);
    expect(replay.run.stateHash()).toBe(straight.stateHash());
  });

  it('of other data shows where the states part', () => {
    const airframe = airframeOf('light-twin');
    airframe.configurations[0].CD0 += 1e-6;
    const again = rerun({ ...spec, airframe }, flown.chunks);
    expect([again.stateHashesAgree, again.firstDifferenceTick]).toEqual([false, 120]);
  });
});

describe('a bad chunk is refused', () => {
  const copy = (): RecordedChunk[] => flown.chunks.map((chunk) => ({ ...chunk, bytes: chunk.bytes.slice() }));
  const trial = (change: (chunks: RecordedChunk[]) => RecordedChunk[] | void): string => {
    const chunks = copy();
    try {
      rerun({ ...spec, attemptKeyHex: KEY }, change(chunks) ?? chunks);
      return 'accepted';
    } catch (error) {
      if (error instanceof Error && 'code' in error && 'index' in error)
        return `${String(error.code)} ${String(error.index)}`;
      throw error;
    }
  };
  it.each<[string, (chunks: RecordedChunk[]) => RecordedChunk[] | void, string]>([
    ['a changed byte of the recorded state hash', (c) => void (c[3].bytes[20] ^= 1), 'chain-broken 3'],
    ['a changed magic', (c) => void (c[2].bytes[0] ^= 1), 'unreadable 2'],
    ['another version', (c) => void (c[0].bytes[4] = 9), 'unreadable 0'],
    ['cut short', (c) => void (c[1] = { ...c[1], bytes: c[1].bytes.slice(0, -3) }), 'unreadable 1'],
    ['bytes left over', (c) => void (c[1] = { ...c[1], bytes: new Uint8Array([...c[1].bytes, 0]) }), 'unreadable 1'],
    ['exchanged', (c) => [c[0], c[2], c[1], ...c.slice(3)], 'wrong-number 1'],
    ['left out', (c) => [c[0], ...c.slice(2)], 'wrong-number 1'],
    [
      'of another attempt',
      (c) => [record(spec, restless, undefined, 'ffffffffffffffff').chunks[0], ...c.slice(1)],
      'chain-broken 0',
    ],
    ['with a forged hash', (c) => void (c[4] = { ...c[4], hash: '0123456789abcdef' }), 'chain-broken 4'],
  ])('%s', (_, change, expected) => {
    expect(trial(change)).toBe(expected);
  });

  it('whatever the bytes are, decoding answers and does not throw (seed 7)', () => {
    const stream = createStream(7, 'bytes');
    for (let i = 0; i < 2000; i++) {
      const bytes =
        i % 2 === 0 ? flown.chunks[i % 9].bytes.slice() : new Uint8Array(Math.floor(stream.uniform() * 200));
      for (let k = 0; k < 3; k++)
        bytes[Math.floor(stream.uniform() * bytes.length)] = Math.floor(stream.uniform() * 256);
      expect(typeof decodeChunk(bytes, 2).ok).toBe('boolean');
    }
  });

  it('verifyChain follows the bytes and the hash before', () => {
    expect(verifyChain(flown.chunks[0], KEY)).toBe(true);
    expect(verifyChain(flown.chunks[1], KEY)).toBe(false);
    expect(verifyChain(flown.chunks[1], flown.chunks[0].hash)).toBe(true);
  });
});

describe('a replay', () => {
  it('stands at any tick as the flight did, in any order', () => {
    const replay = createReplay(spec, flown.chunks);
    const at = (tick: number): object => ({ ...fly(createRun(spec), tick, restless).now });
    for (const tick of [700, 13, 1020, 0, 59, 60, 61, 400, 399, 5000]) {
      replay.seek(tick);
      const wanted = Math.min(tick, 1020);
      expect(replay.run.tick).toBe(wanted);
      expect({ ...replay.observation }).toEqual(at(wanted));
    }
    expect(replay.fired).toEqual(flown.run.fired);
    expect(replay.agrees).toBe(true);
  });
});

describe('the fixture of a fixed recording', () => {
  const file = new URL('../../fixtures/recording-left-cut.json', import.meta.url);
  /** Inputs as [from tick, pedal, stick, live lever]: held until the next row. Any program can write them out. */
  const HELD: [number, number, number, number][] = [
    [0, 0, 0, 32767],
    [430, 9000, 0, 32767],
    [450, 17000, 1500, 32767],
    [700, 15000, 2500, 32767],
    [1100, 14000, 1800, 30000],
    [1500, 13500, 1600, 32767],
  ];
  const held = (sample: ControlSample, tick: number): void => {
    const row = HELD.findLast(([from]) => from <= tick) ?? HELD[0];
    [, sample.pedal, sample.stick, sample.levers[1]] = row;
  };
  it('still ends in the recorded state hash (SIDEWASH_REGENERATE=1 writes it anew)', () => {
    const scenario = shippedScenario('left-engine-cut-after-lift-off');
    const run = fly(createRun({ scenario, airframe: airframeOf('light-twin'), seed: 7 }), Infinity, held);
    const made = {
      about:
        'Inputs held from a tick on as [tick, pedal, stick, right lever], all else neutral, and the state hash they must end in.',
      scenario: 'left-engine-cut-after-lift-off',
      airframe: 'light-twin',
      seed: 7,
      modelVersion: MODEL_VERSION,
      inputs: HELD,
      ticks: run.tick,
      ended: run.ended,
      stateHash: run.stateHash(),
    };
    if (process.env['SIDEWASH_REGENERATE'] === '1') writeFileSync(file, `${JSON.stringify(made, null, 2)}\n`);
    expect(made).toEqual(JSON.parse(readFileSync(file, 'utf8')));
  });
});
