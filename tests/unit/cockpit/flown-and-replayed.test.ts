import fs from 'node:fs';
import { describe, expect, it } from 'vitest';
import { parseAirframe } from '#shared/model/airframe-schema.ts';
import { DEG } from '#shared/units/constants.ts';
import { createRecorder, rerun, type RecordedChunk } from '#shared/scenario/recording.ts';
import { createReplay } from '#shared/scenario/replay.ts';
import { createRun } from '#shared/scenario/run.ts';
import { parseScenario } from '#shared/scenario/scenario-schema.ts';
import { createFlightSession } from '../../../src/runner/flight-session.ts';
import { createKeyboardSource } from '../../../src/runner/input/keyboard-source.ts';
import { DEBRIEF_CHANNELS } from '../../../src/runner/channels.ts';
import { flyReference } from '../../../src/runner/workers/reference-run.ts';
import { createGhost } from '../../../src/features/fly/ghost.ts';
import { computeSpeeds } from '../../../src/features/fly/computed-speeds.ts';
import { speedMarks } from '../../../src/features/fly/speed-marks.ts';
import { allowedWords, briefFacts, eventWords, pitchWords } from '../../../src/features/fly/brief-lines.ts';
import { surveyReplay } from '../../../src/features/replay/survey.ts';
import { valueAt } from '../../../src/components/charts/trace-grid.ts';

const folder = new URL('../../../scenarios/', import.meta.url);
const read = (name: string): unknown => JSON.parse(fs.readFileSync(new URL(name, folder), 'utf8'));
const scenarioOf = (name: string) => {
  const parsed = parseScenario(read(`${name}.json`));
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.issues));
  return parsed.scenario;
};
const airframeOf = (name: string) => {
  const parsed = parseAirframe(read(`airframes/${name}.json`));
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.issues));
  return parsed.airframe;
};
const scenario = scenarioOf('left-engine-cut-after-lift-off');
const airframe = airframeOf('light-twin');
const SEED = 20261201;
const KEY = '0011223344556677';

/** Flies with late, uneven frames and a pedal key, as a browser would; returns the recording. */
function fly(gapsMs: readonly number[]) {
  const run = createRun({ scenario, airframe, seed: SEED });
  const keyboard = createKeyboardSource(run.plant.engineCount);
  const chunks: RecordedChunk[] = [];
  const session = createFlightSession({
    run,
    recorder: createRecorder({ attemptKeyHex: KEY, engineCount: run.plant.engineCount }),
    sources: [keyboard],
    events: {
      chunk: (chunk) => chunks.push(chunk),
      tick: () => {
        if (run.tick === 600) keyboard.press('KeyX');
        if (run.tick === 650) keyboard.lift('KeyX');
      },
    },
  });
  session.start(0);
  let now = 0;
  for (let i = 0; session.phase !== 'ended' && i < 10_000; i += 1) {
    now += gapsMs[i % gapsMs.length];
    session.frame(now);
  }
  return { run, chunks };
}

describe('a flight flown, recorded and replayed', () => {
  const flown = fly([16.7]);

  it('ends in the same state whatever the frame rate', () => {
    expect(flown.run.ended).toBe('completed');
    expect(fly([7, 33, 16, 90, 12]).run.stateHash()).toBe(flown.run.stateHash());
  });

  it('replays to the same state, and any seek shows the same instant', () => {
    const replay = createReplay({ scenario, airframe, seed: SEED, attemptKeyHex: KEY }, flown.chunks);
    expect(replay.agrees).toBe(true);
    replay.seek(replay.durationTicks);
    expect(replay.run.stateHash()).toBe(flown.run.stateHash());
    replay.seek(700);
    const bank = replay.run.now.phiRad;
    replay.seek(1500);
    replay.seek(700);
    expect(replay.run.now.phiRad).toBe(bank);
  });

  it('is surveyed in one pass: traces, zero at the event, first pedal as the criterion has it, film', () => {
    const replay = createReplay({ scenario, airframe, seed: SEED, attemptKeyHex: KEY }, flown.chunks);
    const survey = surveyReplay(replay, DEBRIEF_CHANNELS);
    const cut = replay.fired.find((event) => event.id === 'cut');
    expect(survey.zeroS).toBe(cut?.timeS);
    expect(survey.deadSide).toBe(1);
    const react = flown.run.results().find((result) => result.id === 'react');
    const first = survey.marks.firstCorrectPedalTick;
    // The flag on the trace and the measure of the criterion are one definition.
    expect(((first ?? Number.NaN) - (cut?.tick ?? 0)) / 120).toBeCloseTo(react?.value ?? Number.NaN, 6);
    expect(valueAt(survey.columns[3], 6)).toBeGreaterThan(30);
    expect(survey.film.get(0)?.timeS).toBeCloseTo(survey.zeroS, 1);
    expect(survey.film.get(1)?.deadSide).toBe(1);
    expect(survey.film.get(1)?.verdict).toBe('dead');
  });
});

describe('the reference pilot beside it', () => {
  const reference = flyReference({ id: 1, scenario, airframe, seed: SEED, drawn: flownDrawn(), delayS: 1 });

  function flownDrawn() {
    return createRun({ scenario, airframe, seed: SEED }).drawn;
  }

  it('meets the scenario and has a sample thirty times a second', () => {
    expect(reference.passed).toBe(true);
    expect(reference.samples).toBe(15 * 30 + 1);
    expect(reference.columns.bank.length).toBe(reference.samples);
  });

  it('gives a ghost between its samples and none after its end', () => {
    const ghost = createGhost(createRun({ scenario, airframe, seed: SEED }).now, reference);
    const k = 200;
    const half = ghost.at((k + 0.5) / 30);
    expect(half?.northM).toBeCloseTo((reference.ghost.northM[k] + reference.ghost.northM[k + 1]) / 2, 9);
    expect(ghost.at(15)).toBeNull();
  });
});

describe('speed marks', () => {
  it('light twin, take-off: minimum control speed 66.3 kt (left engine critical) above the stall at 60.5 kt', () => {
    // Computed with an independent implementation of the flight model page, sea level; here 60 ft higher. Tolerance 0.3 kt.
    const speeds = computeSpeeds(scenario, airframe);
    expect((speeds.minimumControlMps ?? 0) / (1852 / 3600)).toBeCloseTo(66.3, 0);
    expect((speeds.stallMps ?? 0) / (1852 / 3600)).toBeCloseTo(60.5, 0);
    const marks = speedMarks(airframe, scenario.configuration, speeds);
    expect(marks.find((mark) => mark.floor)?.name).toBe('Vmca');
  });

  it('an aeroplane without an engine moment has no minimum control speed, and the stall is the floor', () => {
    const single = airframeOf('single-trainer');
    const speeds = computeSpeeds({ ...scenario, configuration: null, loading: null }, { ...single, engines: [] });
    expect(speeds.minimumControlMps).toBeNull();
    expect(speedMarks(single, null, speeds).find((mark) => mark.floor)?.name).toBe('stall');
  });
});

describe('briefing', () => {
  it('tells what is known and nothing of what is drawn by lot', () => {
    const facts = briefFacts(scenario, airframe, 'aviation');
    expect(facts.find((fact) => fact.name === 'Heading')?.value).toBe('090°');
    expect(facts.find((fact) => fact.name === 'Airspeed')?.value).toContain('88');
    const told = [eventWords(scenario), pitchWords(scenario, 'aviation'), allowedWords(scenario.allow)].join(' ');
    expect(told).not.toMatch(/left|engine|2\.5|3 s/i);
    expect(told).toContain('drawn anew');
  });
});

describe('reading a trace beside its run', () => {
  it('signs: bank right positive, heading right positive', () => {
    const reference = flyReference({ id: 1, scenario, airframe, seed: SEED, drawn: {}, delayS: 5 });
    const worst = Math.min(...reference.columns.bank);
    // Left engine cut and nobody at the controls for five seconds: it rolls left, far.
    expect(worst * DEG).toBeLessThan(-0.5);
    expect(Math.min(...reference.columns.heading)).toBeLessThan(-10);
  });
});

describe('a flight that goes back and on from there', () => {
  const run = createRun({ scenario, airframe, seed: SEED });
  const keyboard = createKeyboardSource(run.plant.engineCount);
  const chunks: RecordedChunk[] = [];
  const branches: [number, number][] = [];
  const session = createFlightSession({
    run,
    recorder: createRecorder({ attemptKeyHex: KEY, engineCount: run.plant.engineCount }),
    sources: [keyboard],
    events: {
      chunk: (chunk) => chunks.push(chunk),
      branched: (tick, from) => branches.push([tick, from]),
    },
  });
  let now = 0;
  const flyTo = (tick: number): void => {
    while (session.phase === 'running' && run.tick < tick) session.frame((now += 8));
  };
  session.start(0);
  flyTo(700);
  const firstHash = new Map<number, string>();
  session.freeze('pilot');
  const head = run.tick;
  const headHash = run.stateHash();

  it('shows any earlier tick and comes back to the head without a trace', () => {
    for (const tick of [0, 1, 119, 120, 121, 361, head]) {
      session.standAt(tick);
      expect(run.tick).toBe(tick);
      firstHash.set(tick, run.stateHash());
    }
    expect(run.stateHash()).toBe(headHash);
    session.standAt(361);
    expect(run.stateHash()).toBe(firstHash.get(361));
    session.standAt(head);
    session.step();
    expect(run.tick).toBe(head + 1);
    expect(branches).toEqual([]);
  });

  it('goes on from an earlier tick, is recorded as a branch, and integrates again to the same state', () => {
    session.standAt(361);
    session.resume(now);
    expect(branches).toEqual([[361, head + 1]]);
    keyboard.press('KeyX');
    flyTo(500);
    keyboard.lift('KeyX');
    session.freeze('pilot');
    session.standAt(400);
    session.step();
    expect(run.tick).toBe(401);
    session.resume(now);
    while (session.phase === 'running') session.frame((now += 8));
    expect(branches).toHaveLength(2);
    const again = rerun({ scenario, airframe, seed: SEED, attemptKeyHex: KEY }, chunks);
    expect(again.stateHashesAgree).toBe(true);
    expect(again.run.stateHash()).toBe(run.stateHash());
    expect(again.run.tick).toBe(run.tick);
    expect(run.stateHash()).not.toBe(fly([16.7]).run.stateHash());
  });

  it('is left where it stands, not where it is being looked at', () => {
    const other = createRun({ scenario, airframe, seed: SEED });
    const kept: RecordedChunk[] = [];
    const left = createFlightSession({
      run: other,
      recorder: createRecorder({ attemptKeyHex: KEY, engineCount: other.plant.engineCount }),
      sources: [],
      events: { chunk: (chunk) => kept.push(chunk) },
    });
    left.start(0);
    for (let t = 8; t < 3000; t += 8) left.frame(t);
    left.freeze('pilot');
    const stands = other.tick;
    left.standAt(50);
    left.leave();
    expect(other.tick).toBe(stands);
    expect(rerun({ scenario, airframe, seed: SEED, attemptKeyHex: KEY }, kept).stateHashesAgree).toBe(true);
  });
});
