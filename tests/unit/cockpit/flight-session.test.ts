import { describe, expect, it } from 'vitest';
import type { FreezeReason, FlightPhase } from '../../../src/runner/flight-session.ts';
import { createFlightSession } from '../../../src/runner/flight-session.ts';
import type { InputSource } from '../../../src/runner/input/input-source.ts';
import { fakeRecorder, fakeRun } from './fakes.ts';

function setup() {
  const fake = fakeRun();
  const { recorder, log } = fakeRecorder();
  const phases: [FlightPhase, FreezeReason | null][] = [];
  const chunks: number[] = [];
  const heldMs: number[] = [];
  let released = 0;
  let ended: string | null = null;
  const pedal: InputSource = {
    id: 'x',
    kind: 'pads',
    name: 'x',
    stepInto: (axes) => {
      axes.pedal = 0.5;
    },
    release: () => (released += 1),
  };
  const session = createFlightSession({
    run: fake.run,
    recorder,
    sources: [pedal],
    events: {
      phase: (phase, reason) => phases.push([phase, reason]),
      chunk: (chunk) => chunks.push(chunk.tickCount),
      held: (ms) => heldMs.push(ms),
      ended: (reason) => (ended = reason),
    },
  });
  const frames = (from: number, to: number, gap = 1000 / 60) => {
    for (let t = from; t <= to + 1e-9; t += gap) session.frame(t);
  };
  return { ...fake, fake, log, phases, chunks, heldMs, session, frames, released: () => released, ended: () => ended };
}

describe('flight session', () => {
  it('flies what the sources hold, quantised, one sample a tick', () => {
    const s = setup();
    s.session.start(0);
    s.frames(0, 1000);
    expect(Math.abs(s.run.tick - 120)).toBeLessThanOrEqual(1);
    expect(s.samples.length).toBe(s.run.tick);
    expect(s.samples.every((sample) => sample.pedal === 16384)).toBe(true);
  });

  it('hands on a chunk a second and the short last one at the end', () => {
    const s = setup();
    s.fake.endAt = { tick: 300, reason: 'completed' };
    s.session.start(0);
    s.frames(0, 4000);
    expect(s.chunks).toEqual([120, 120, 60]);
    expect(s.session.phase).toBe('ended');
    expect(s.ended()).toBe('completed');
    expect(s.run.tick).toBe(300);
    expect(s.session.chunkCount).toBe(3);
  });

  it('does nothing before the start and nothing while frozen', () => {
    const s = setup();
    s.frames(0, 500);
    expect(s.run.tick).toBe(0);
    s.session.start(600);
    s.frames(600, 1000);
    const tick = s.run.tick;
    s.session.freeze('pilot');
    s.frames(1016, 9000);
    expect(s.run.tick).toBe(tick);
    expect(s.log).toContain(`freeze@${tick}`);
    s.session.resume(9000);
    s.session.frame(9000);
    s.frames(9016, 9100);
    expect(s.log).toContain(`resume@${tick}`);
    expect(s.run.tick - tick).toBeLessThan(14);
    expect(s.released()).toBeGreaterThanOrEqual(3); // start, freeze, resume
  });

  it('freezes where the scenario asks and on a page that slept', () => {
    const s = setup();
    s.fake.freezeAt.add(30);
    s.session.start(0);
    s.frames(0, 900);
    expect(s.run.tick).toBe(30);
    expect(s.phases.at(-1)).toEqual(['frozen', 'scenario']);
    s.fake.freezeAt.clear();
    s.session.resume(1000);
    s.session.frame(1016);
    const tick = s.run.tick;
    s.session.frame(8000);
    expect(s.phases.at(-1)).toEqual(['frozen', 'gap']);
    expect(s.run.tick).toBe(tick);
  });

  it('a late frame is held, said and never flown', () => {
    const s = setup();
    s.session.start(0);
    s.session.frame(16);
    const tick = s.run.tick;
    s.session.frame(416);
    expect(s.run.tick).toBe(tick);
    expect(s.heldMs).toEqual([400]);
    expect(s.session.phase).toBe('running');
  });

  it('marks the rate and flies at it', () => {
    const s = setup();
    s.session.start(0);
    s.session.setRate(0.5);
    s.frames(0, 1000);
    expect(Math.abs(s.run.tick - 60)).toBeLessThanOrEqual(1);
    expect(s.log[0]).toBe('rate@0=0.5');
  });

  it('leaving ends the recording with what was flown', () => {
    const s = setup();
    s.session.start(0);
    s.frames(0, 500);
    s.session.leave();
    expect(s.ended()).toBe('left');
    expect(s.chunks.reduce((a, b) => a + b, 0)).toBe(s.run.tick);
    s.session.leave();
    expect(s.chunks.length).toBe(1);
  });

  it('draws between ticks and shows the sample otherwise', () => {
    const s = setup();
    s.session.start(0);
    s.session.setRate(0.1); // 12 ticks a second: five frames a tick
    s.frames(0, 500);
    const { northM } = s.session.drawn;
    expect(northM).toBeLessThanOrEqual(s.run.now.northM);
    expect(northM).toBeGreaterThanOrEqual(s.run.now.northM - 1);
    s.session.freeze('pilot');
    s.session.frame(600);
    expect(s.session.drawn.northM).toBe(s.run.now.northM);
    expect(s.session.drawn.levers).not.toBe(s.run.now.levers);
  });
});
