import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { clockOffset, clockTick, msOfTick, segmentAt, segmentTick } from '#shared/scenario/class-clock.ts';
import { decodeFrame, encodeFrame, fromBase64, toBase64 } from '#shared/scenario/class-frames.ts';
import { classEntrySchema, type ClassDeed, type ClassEntry } from '#shared/scenario/class-log.ts';
import {
  controlsAt,
  EMPTY_CLASS,
  foldLog,
  freeSeat,
  headTickAt,
  injectedOn,
  memberOf,
  phaseAt,
  runsOf,
  standsInThePast,
  tickAt,
  type ClassRun,
} from '#shared/scenario/class-state.ts';
import { firstDifference } from '#shared/scenario/input-line.ts';

const id = (n: number): string => `00000000-0000-4000-8000-${String(n).padStart(12, '0')}`;
const marker = (name: string) => ({ id: name, lane: 'notes', kind: 'marker', text: 'x', at: { time_s: 0 } }) as const;

const OPENED: ClassDeed = {
  kind: 'opened',
  title: 'Tuesday',
  playlist: [{ slug: 'a', revision: 1, title: 'A', durationTicks: 3600 }],
  seats: 3,
  mode: 'demonstration',
  guests: true,
  options: EMPTY_CLASS.options,
  instructor: { member: id(1), name: 'I' },
  expected: [{ member: id(2), name: 'E', seat: 1 }],
};
const STARTED: ClassDeed = {
  kind: 'started',
  run: 1,
  mode: 'demonstration',
  index: 0,
  seed: 7,
  drawn: {},
  startMs: 10_000,
  attempt: id(9),
  controls: id(1),
  restartOf: null,
};
/** Entries at the times given, every one as the schema has it. */
function logOf(...deeds: [number, ClassDeed][]): ClassEntry[] {
  return deeds.map(([atMs, deed], i) => classEntrySchema.parse({ ...deed, seq: i + 1, atMs, by: id(1) }));
}
function runAfter(...deeds: [number, ClassDeed][]): ClassRun {
  const { run } = foldLog(logOf([0, OPENED], [5000, STARTED], ...deeds));
  if (run === null) throw new Error('no run');
  return run;
}
const clock = (
  fromMs: number,
  tick: number,
  rate: number,
  why: 'freeze' | 'resume' | 'rate' | 'rewind' = 'freeze',
): ClassDeed => ({
  kind: 'clock',
  fromMs,
  tick,
  rate,
  why,
});

describe('the roster', () => {
  it('keeps seats for those expected, gives the lowest free one, and takes back what is left', () => {
    const before = foldLog(logOf([0, OPENED]));
    expect(freeSeat(before)).toBe(2);
    const joined: ClassDeed = { kind: 'joined', member: id(3), name: 'G', role: 'guest', seat: 2 };
    const full = foldLog(
      logOf([0, OPENED], [1, joined], [2, { kind: 'joined', member: id(4), name: 'T', role: 'trainee', seat: 3 }]),
    );
    expect(freeSeat(full)).toBeNull();
    const out = foldLog(logOf([0, OPENED], [1, joined], [2, { kind: 'removed', member: id(3) }]));
    expect(memberOf(out, id(3))?.standing).toBe('removed');
    expect(freeSeat(out)).toBe(2);
  });

  it('is the same whether the log is folded at once or entry by entry', () => {
    const log = logOf([0, OPENED], [5000, STARTED], [12_000, clock(12_250, 270, 0)], [13_000, { kind: 'ended' }]);
    expect(foldLog(log.slice(2), foldLog(log.slice(0, 2)))).toEqual(foldLog(log));
  });
});

describe('the clock', () => {
  it('counts down, runs, slows, stops and is over', () => {
    const run = runAfter([14_000, clock(15_000, 600, 0.5, 'rate')], [16_000, clock(17_000, 720, 0)]);
    expect([9000, 12_000, 16_000, 20_000].map((ms) => tickAt(run, ms))).toEqual([0, 240, 660, 720]);
    expect([9000, 12_000, 20_000].map((ms) => phaseAt(run, ms))).toEqual(['countdown', 'running', 'frozen']);
    expect(phaseAt(runAfter(), 10_000 + 31_000)).toBe('over');
    expect(tickAt(runAfter(), 10_000 + 31_000)).toBe(3600);
  });

  it('stands in the past after a rewind, keeps its head, and starts from there as a branch', () => {
    const rewound = runAfter([15_000, clock(15_000, 120, 0, 'rewind')]);
    expect([tickAt(rewound, 16_000), headTickAt(rewound, 16_000)]).toEqual([120, 600]);
    expect(standsInThePast(rewound, 16_000)).toBe(true);
    const branched = runAfter(
      [15_000, clock(15_000, 120, 0, 'rewind')],
      [16_000, { kind: 'branched', branch: 1, from: 0, tick: 120 }],
      [16_000, clock(16_250, 120, 1, 'resume')],
    );
    expect([tickAt(branched, 17_250), headTickAt(branched, 17_250)]).toEqual([240, 240]);
    expect(standsInThePast(branched, 17_250)).toBe(false);
  });

  it('goes on from a tick at the time at which it has reached it, whatever the rate (seed 11)', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 1e6 }),
        fc.integer({ min: 0, max: 4000 }),
        fc.double({ min: 0.05, max: 1, noNaN: true }),
        fc.integer({ min: 0, max: 4000 }),
        (fromMs, tick, rate, ahead) => {
          const segment = { fromMs, tick, rate };
          expect(segmentTick(segment, msOfTick(segment, tick + ahead))).toBe(tick + ahead);
        },
      ),
      { seed: 11 },
    );
  });

  it('never runs back within a branch (seed 12)', () => {
    fc.assert(
      fc.property(
        fc.array(fc.tuple(fc.integer({ min: 10, max: 3000 }), fc.constantFrom(0, 0.25, 0.5, 1)), { maxLength: 12 }),
        (changes) => {
          const segments = [{ fromMs: 1000, tick: 0, rate: 1 }];
          let ms = 1000;
          for (const [later, rate] of changes) {
            ms += later;
            segments.push({ fromMs: ms, tick: clockTick(segments, ms, 1e9), rate });
          }
          let last = 0;
          for (let t = 0; t < ms + 2000; t += 37) {
            const tick = clockTick(segments, t, 1e9);
            expect(tick).toBeGreaterThanOrEqual(last);
            last = tick;
          }
          expect(segmentAt(segments, ms)).toBe(segments.at(-1));
        },
      ),
      { seed: 12 },
    );
  });

  it('is read off the fastest answers of the server', () => {
    // The server is 120 s ahead; the second answer came back in 10 ms, the others late on one leg.
    const answers = [
      { askedMs: 0, serverMs: 120_400, answeredMs: 410 },
      { askedMs: 1000, serverMs: 121_005, answeredMs: 1010 },
      { askedMs: 2000, serverMs: 122_003, answeredMs: 2600 },
    ];
    expect(clockOffset(answers)).toEqual({ offsetMs: 120_000, roundTripMs: 10 });
  });
});

describe('events that a class adds', () => {
  it('are in force on their branch; a branch has those from before it, and what was taken back only later', () => {
    const run = runAfter(
      [11_000, { kind: 'injected', tick: 100, event: marker('live-1') }],
      [12_000, { kind: 'injected', tick: 300, event: marker('live-2') }],
      [13_000, { kind: 'disarmed', id: 'live-1', tick: 360 }],
      [14_000, { kind: 'branched', branch: 1, from: 0, tick: 200 }],
      [15_000, { kind: 'injected', tick: 250, event: marker('live-3') }],
    );
    const listOf = (branch: number) => injectedOn(run, branch).map(({ event, tick, until }) => [event.id, tick, until]);
    expect(listOf(0)).toEqual([
      ['live-1', 100, 360],
      ['live-2', 300, null],
    ]);
    expect(listOf(1)).toEqual([
      ['live-1', 100, null],
      ['live-3', 250, null],
    ]);
    expect(firstDifference(injectedOn(run, 0), injectedOn(run, 1))).toBe(250);
    expect(firstDifference(injectedOn(run, 0), injectedOn(run, 0))).toBeNull();
  });

  it('belong to their run: a new run has none', () => {
    const log = logOf(
      [0, OPENED],
      [5000, STARTED],
      [11_000, { kind: 'injected', tick: 100, event: marker('live-1') }],
      [20_000, { kind: 'over', run: 1, tick: 1200 }],
      [21_000, { ...STARTED, run: 2, startMs: 24_000, restartOf: 1 }],
    );
    const runs = runsOf(log);
    expect(runs.map(({ overAt, branches }) => [overAt, branches[0].injected.length])).toEqual([
      [1200, 1],
      [null, 0],
    ]);
  });
});

describe('the controls', () => {
  it('are whose they were at a tick, also after a branch from before they were handed on', () => {
    const handed: [number, ClassDeed] = [12_000, { kind: 'controls', member: id(3), tick: 300 }];
    const run = runAfter(handed);
    expect([0, 299, 300].map((tick) => controlsAt(run, tick))).toEqual([id(1), id(1), id(3)]);
    const branched = runAfter(handed, [14_000, { kind: 'branched', branch: 1, from: 0, tick: 200 }]);
    expect(controlsAt(branched, 400)).toBe(id(1));
  });
});

describe('frames', () => {
  it('come out as they went in', () => {
    const channels = Array.from({ length: 8 }, (_, c) => Int16Array.from(c < 6 ? [c, c * 7, 1] : [0, 1, c - 6]));
    const text = encodeFrame({
      branch: 3,
      startTick: 481,
      tickCount: 3,
      engineCount: 2,
      channels,
      stateHash: 'ab'.repeat(8),
    });
    const frame = decodeFrame(text, 2);
    expect(frame).toMatchObject({ branch: 3, startTick: 481, tickCount: 3, stateHash: 'ab'.repeat(8) });
    expect(frame?.content.channels).toEqual(channels);
  });

  it('of anything else are none (seed 13)', () => {
    fc.assert(
      fc.property(fc.oneof(fc.string(), fc.base64String()), (text) => {
        expect(decodeFrame(text, 2)).toBeNull();
      }),
      { seed: 13 },
    );
  });

  it('are base64 as everybody writes it (seed 14)', () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 64 }), (bytes) => {
        expect(toBase64(bytes)).toBe(Buffer.from(bytes).toString('base64'));
        expect(fromBase64(toBase64(bytes))).toEqual(new Uint8Array(bytes));
      }),
      { seed: 14 },
    );
  });
});
