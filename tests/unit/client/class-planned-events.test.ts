import { describe, expect, it } from 'vitest';
import { telemetrySchema } from '#shared/contracts/class-socket.ts';
import { eventSchema } from '#shared/scenario/scenario-schema.ts';
import type { ClassRun } from '#shared/scenario/class-state.ts';
import { lineMarks, plannedEvents, zeroOf } from '../../../src/features/class/planned-events.ts';
import { type ReplayLine, sampleAt } from '../../../src/features/class/class-replays.ts';
import { telemetryAt } from '../../support/class-client.ts';

const event = (given: object) => eventSchema.parse(given);
const note = event({ id: 'low', lane: 'notes', kind: 'marker', text: 'Low', at: { time_s: 1 } });
const cut = event({ id: 'cut', lane: 'engines', kind: 'engine-failure', engine: 'left', at: { time_s: 3 } });
const yaw = { lane: 'systems', kind: 'yaw-damper', on: false };
const after = event({ ...yaw, id: 'damper', at: { after: 'cut', delay_s: 4 } });
const whenever = event({ ...yaw, id: 'never', at: { when: 'ias < 60 kt' } });
const late = event({ ...yaw, id: 'live-1', at: { time_s: 0 } });
const armed = event({ ...yaw, id: 'live-2', at: { time_s: 20 } });
const run: ClassRun = {
  run: 1,
  mode: 'everyone-flies',
  index: 0,
  seed: 1,
  drawn: { cut: { time_s: 2.5 } },
  startMs: 0,
  durationTicks: 3600,
  attempt: null,
  restartOf: null,
  segments: [{ fromMs: 0, tick: 0, rate: 1 }],
  branches: [
    {
      from: 0,
      tick: 0,
      injected: [
        { tick: 1200, event: late, until: null },
        { tick: 600, event: armed, until: null },
        { tick: 600, event: { ...armed, id: 'live-3' }, until: 700 },
      ],
    },
  ],
  branch: 0,
  headBefore: 0,
  controls: [],
  shown: null,
  overAt: null,
};
const planned = plannedEvents([note, cut, after, whenever], run);

describe('events on the time line of a class', () => {
  it('stand where they were drawn, where they were added, and after one another; what was taken back or waits for a condition is not there', () => {
    expect(planned.map(({ id, timeS }) => [id, timeS])).toEqual([
      ['low', 1],
      ['cut', 2.5],
      ['damper', 6.5],
      ['live-1', 10],
      ['live-2', 20],
    ]);
  });

  it('are told to trainees only once they have happened', () => {
    const fired = [
      {
        id: 'cut',
        lane: 'engines',
        kind: 'engine-failure',
        text: 'Left engine fails',
        timeS: 2.5,
        tick: 300,
        injected: false,
      },
    ] as const;
    expect(lineMarks(planned, [...fired], 4, false).map(({ id }) => id)).toEqual(['cut']);
    const all = lineMarks(planned, [...fired], 4, true);
    expect(all.map(({ id, happened }) => [id, happened])).toEqual([
      ['low', false],
      ['cut', true],
      ['damper', false],
      ['live-1', false],
      ['live-2', false],
    ]);
    expect(zeroOf(all)?.id).toBe('cut');
    // The instructor's browser flies nothing: the clock alone says what has happened.
    expect(lineMarks(planned, null, 7, false).map(({ id }) => id)).toEqual(['low', 'cut', 'damper']);
    expect(zeroOf(lineMarks(planned, null, 1.5, true))).toBeNull();
  });
});

describe('the class again in step', () => {
  it('shows of each attempt the last moment that is not later than the cursor', () => {
    const line: ReplayLine = { id: 'a', seat: 1, name: 'A', samples: [0, 12, 24, 36].map(telemetryAt) };
    expect([-1, 0, 0.1, 0.15, 0.3, 99].map((s) => sampleAt(line, s)?.tick)).toEqual([0, 0, 12, 12, 36, 36]);
    expect(sampleAt({ ...line, samples: [] }, 1)).toBeNull();
  });
});

describe('what the board is told', () => {
  it('takes an aeroplane far out of balance: that is whom the instructor looks for', () => {
    const wild = { ...telemetryAt(120), betaDeg: -34.5, wantedBetaDeg: 12, phiDeg: 178, peakBetaDeg: 41, stillS: 30 };
    expect(telemetrySchema.safeParse(wild).error).toBeUndefined();
    expect(telemetrySchema.safeParse({ ...wild, betaDeg: 181 }).success).toBe(false);
    expect(telemetrySchema.safeParse({ ...wild, pedal: 11 }).success).toBe(false);
  });
});
