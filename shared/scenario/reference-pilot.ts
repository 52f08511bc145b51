/**
 * Pilots that fly a run: hands off, and the reference pilot, who wakes a stated time after the first event and follows the
 * law of `pilot-core.ts`. They hand over control samples like any other pilot, so that a run flown by them is a recording too.
 */
import { tasFromCas } from '../model/airspeeds.ts';
import { TICK_RATE_HZ } from '../model/plant-types.ts';
import { DEG, FT, KT } from '../units/constants.ts';
import { createPilotCore, type PilotCore, type PilotMemory, type PilotTask } from './pilot-core.ts';
import type { ControlSample, Run } from './run-types.ts';
import type { Scenario } from './scenario-format.ts';

/** Delay of the reference pilot where none is given; s. */
export const DEFAULT_DELAY_S = 1;
const FULL = 32767;

export interface Pilot {
  /** Writes the input for the run's present tick. Levers and feather switches are left as they are. */
  sampleInto(sample: ControlSample): void;
}
export interface ReferencePilot extends Pilot {
  /** Tick at which the pilot wakes; null before the first event, when it wakes by an event. */
  readonly wakeTick: number | null;
  readonly awake: boolean;
  save(): { awake: boolean; memory: PilotMemory };
  restore(kept: { awake: boolean; memory: PilotMemory }): void;
}

/** Holds the trimmed start inputs; scripted inputs of the scenario stay in force. */
export function handsOff(): Pilot {
  return {
    sampleInto(sample) {
      sample.stick = 0;
      sample.pedal = 0;
      sample.pitch = 0;
    },
  };
}

/** The task of a scenario in SI units. */
export function pilotTask(scenario: Scenario): PilotTask {
  const { reference, runway, start } = scenario;
  switch (reference.task) {
    case 'hold-heading':
      return { kind: 'hold-heading' };
    case 'turn':
      return { kind: 'turn', bankRad: reference.bank_deg * DEG };
    case 'hold-track':
      return {
        kind: 'hold-track',
        decrabM: reference.decrab_ft * FT,
        headingRad: (runway?.heading_deg ?? start.heading_deg) * DEG,
        elevationM: (runway?.elevation_ft ?? 0) * FT,
      };
  }
}

/** Delay in ticks: times snap to the nearest tick. */
export const delayTicks = (delayS: number): number => Math.round(delayS * TICK_RATE_HZ);

/** Tick of the first event that fired in any lane but notes; null when none has. */
export function firstEventTick(run: Run): number | null {
  for (const event of run.fired) if (event.lane !== 'notes') return event.tick;
  return null;
}

/**
 * The reference pilot on a run.
 *
 * @param run     The run, at its start.
 * @param delayS  Seconds from the first event (or from the start, when the task is not hold-heading) until it wakes.
 * @throws {NumericsError} uncontrollable-pair, no-stabilising-solution.
 */
export function createReferencePilot(run: Run, delayS: number): ReferencePilot {
  const { scenario } = run.spec;
  const task = pilotTask(scenario);
  const heightM = scenario.start.height_ft * FT;
  const core: PilotCore = createPilotCore(run.plant, task, scenario.technique, {
    tasMps: tasFromCas(scenario.start.ias_kt * KT, heightM),
    heightM,
    thetaRad: scenario.start.path_deg * DEG,
  });
  const delay = delayTicks(delayS);
  const byEvent = task.kind === 'hold-heading';
  let awake = false;

  const wakeTick = (): number | null => {
    if (!byEvent) return delay;
    const first = firstEventTick(run);
    return first === null ? null : first + delay;
  };

  return {
    get wakeTick() {
      return wakeTick();
    },
    get awake() {
      return awake;
    },
    sampleInto(sample) {
      if (!awake) {
        const at = wakeTick();
        awake = at !== null && run.tick >= at;
      }
      if (awake) core.step();
      sample.stick = Math.round(core.stick * FULL);
      sample.pedal = Math.round(core.pedal * FULL);
      sample.pitch = 0;
    },
    save: () => ({ awake, memory: core.save() }),
    restore(kept) {
      awake = kept.awake;
      core.restore(kept.memory);
    },
  };
}

/** Flies a run to its end, or to a tick. Returns the run. */
export function flyRun(run: Run, pilot: Pilot, toTick = Infinity, onTick?: (run: Run) => void): Run {
  const sample = run.neutralSample();
  while (run.ended === null && run.tick < toTick) {
    const before = run.tick;
    pilot.sampleInto(sample);
    run.step(sample);
    onTick?.(run);
    if (run.tick === before) break;
  }
  return run;
}
