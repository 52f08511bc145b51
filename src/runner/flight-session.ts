/**
 * One flight: the run driven by the fixed clock, pilot input quantised every tick, everything recorded, chunks handed on.
 * `frame(nowMs)` is called once an animation frame by whoever draws; nothing here runs by itself.
 */
import { TICK_RATE_HZ, TICK_S } from '#shared/model/plant-types.ts';
import type { Observation } from '#shared/model/plant-types.ts';
import type { Recorder, RecordedChunk } from '#shared/scenario/recording.ts';
import type { ControlSample, EndReason, Run } from '#shared/scenario/run-types.ts';
import { type FixedClock, createFixedClock } from './fixed-clock.ts';
import type { InputSource } from './input/input-source.ts';
import { type PilotAxes, axesOf, quantiseInto } from './input/pilot-axes.ts';
import {
  type Pose,
  blendPoseInto,
  cloneObservation,
  copyObservationInto,
  copyPoseInto,
  createPose,
} from './observation-copy.ts';
import { createFlownBranch } from './flown-branch.ts';

export type FlightPhase = 'ready' | 'running' | 'frozen' | 'ended';
/** Why the clock stands: the pilot, the scenario, a hidden page, a sleeping page, a slow machine, a lost device. */
export type FreezeReason = 'pilot' | 'scenario' | 'hidden' | 'gap' | 'slow' | 'device';

export interface FlightEvents {
  /** After every tick. */
  tick?: (run: Run) => void;
  phase?: (phase: FlightPhase, reason: FreezeReason | null) => void;
  /** Real time that was not flown because a frame came late; ms. */
  held?: (heldMs: number) => void;
  chunk?: (chunk: RecordedChunk) => void;
  ended?: (reason: EndReason, detail: string | null) => void;
  /** The flight goes on from an earlier tick: what was flown after it stays recorded as a branch of its own. */
  branched?: (tick: number, fromTick: number) => void;
}

export interface FlightSetup {
  run: Run;
  recorder: Recorder;
  sources: readonly InputSource[];
  events?: FlightEvents;
  clock?: FixedClock;
}

export interface FlightSession {
  readonly run: Run;
  readonly phase: FlightPhase;
  readonly freezeReason: FreezeReason | null;
  readonly rate: number;
  readonly axes: PilotAxes;
  /** The observation to draw: the last sample with its pose moved on to the present instant. */
  readonly drawn: Observation;
  start(nowMs: number): void;
  frame(nowMs: number): void;
  freeze(reason: FreezeReason): void;
  resume(nowMs: number): void;
  setRate(rate: number): void;
  /** Flies one tick of a frozen flight with the controls as they are held. */
  step(): void;
  /** The last tick flown on this branch. */
  readonly headTick: number;
  /** Shows a frozen flight at an earlier tick, or again at a later one up to the head. Going on from there makes a branch. */
  standAt(tick: number): void;
  /** Tells `visit` every tick of the branch again, from the start to the present one. */
  retrace(visit: (run: Run) => void): void;
  /** Ends the flight before its end. */
  leave(): void;
  /** Chunks handed on so far. */
  readonly chunkCount: number;
}

export function createFlightSession(setup: FlightSetup): FlightSession {
  const { run, recorder, sources } = setup;
  const events = setup.events ?? {};
  const clock = setup.clock ?? createFixedClock();
  const sample: ControlSample = run.neutralSample();
  const axes = axesOf(sample);
  const drawn = cloneObservation(run.now);
  const before: Pose = createPose();
  copyPoseInto(before, run.now);
  let phase: FlightPhase = 'ready';
  let freezeReason: FreezeReason | null = null;
  let chunkCount = 0;
  /** Ticks since the last chunk: the state hash is worth its cost only once a second. */
  let pending = 0;
  const branch = createFlownBranch(run);
  /** State hash at the head while an earlier tick is shown; null at the head. */
  let headHash: string | null = null;

  const setPhase = (next: FlightPhase, reason: FreezeReason | null): void => {
    phase = next;
    freezeReason = reason;
    events.phase?.(next, reason);
  };
  const handOn = (chunk: RecordedChunk | null): void => {
    if (!chunk) return;
    chunkCount = chunk.index + 1;
    events.chunk?.(chunk);
  };
  const letGo = (): void => {
    for (const source of sources) source.release();
  };

  /** Leaves what was flown after the shown tick behind, in the recording and here. */
  function branchOff(): void {
    if (headHash === null) return;
    const from = branch.head;
    if (run.tick < from) {
      recorder.mark({ kind: 'rewind', tick: from, value: run.tick });
      handOn(recorder.cut(headHash));
      pending = 0;
      branch.cutAt(run.tick);
      branch.lastSampleInto(axes);
      events.branched?.(run.tick, from);
    }
    headHash = null;
  }

  function finish(): void {
    clock.stop();
    handOn(recorder.finish(run.stateHash()));
    letGo();
    setPhase('ended', null);
    if (run.ended) events.ended?.(run.ended, run.endDetail);
  }

  function freeze(reason: FreezeReason): void {
    if (phase !== 'running') return;
    clock.stop();
    letGo();
    recorder.mark({ kind: 'freeze', tick: run.tick });
    setPhase('frozen', reason);
  }

  /** Flies one tick; returns false when the flight must not go on in this frame. */
  function flyTick(): boolean {
    for (const source of sources) source.stepInto(axes, TICK_S);
    quantiseInto(sample, axes);
    const tick = run.tick;
    copyPoseInto(before, run.now);
    run.step(sample);
    branch.add(sample);
    // Every input is recorded, also the one after which the model left its numbers: the server must find the same.
    recorder.add(sample, tick);
    pending += 1;
    if (pending >= TICK_RATE_HZ) {
      handOn(recorder.takeChunk(run.stateHash()));
      pending = 0;
    }
    events.tick?.(run);
    if (run.ended) {
      finish();
      return false;
    }
    if (run.freezeRequested) {
      freeze('scenario');
      return false;
    }
    return true;
  }

  function draw(): void {
    copyObservationInto(drawn, run.now);
    if (phase === 'running') blendPoseInto(drawn, before, run.now, clock.fraction);
  }

  return {
    run,
    axes,
    drawn,
    get phase() {
      return phase;
    },
    get freezeReason() {
      return freezeReason;
    },
    get rate() {
      return clock.rate;
    },
    get chunkCount() {
      return chunkCount;
    },
    start(nowMs) {
      if (phase !== 'ready') return;
      letGo();
      clock.start(nowMs);
      setPhase('running', null);
    },
    frame(nowMs) {
      if (phase === 'running' || phase === 'frozen') for (const source of sources) source.poll?.();
      if (phase === 'running') {
        const { ticks, heldMs, stopped } = clock.advance(nowMs);
        if (stopped) freeze(stopped);
        else {
          if (heldMs > 0) events.held?.(heldMs);
          for (let i = 0; i < ticks; i += 1) if (!flyTick()) break;
        }
      }
      draw();
    },
    freeze,
    resume(nowMs) {
      if (phase !== 'frozen') return;
      letGo();
      branchOff();
      recorder.mark({ kind: 'resume', tick: run.tick });
      clock.start(nowMs);
      setPhase('running', null);
    },
    setRate(rate) {
      if (rate === clock.rate || phase === 'ended') return;
      clock.rate = rate;
      recorder.mark({ kind: 'rate', tick: run.tick, value: rate });
    },
    get headTick() {
      return branch.head;
    },
    step() {
      if (phase !== 'frozen') return;
      branchOff();
      flyTick();
    },
    standAt(tick) {
      if (phase !== 'frozen') return;
      headHash ??= run.stateHash();
      branch.standAt(Math.max(0, Math.min(branch.head, Math.round(tick))));
      if (run.tick === branch.head) headHash = null;
    },
    retrace(visit) {
      const here = run.tick;
      branch.standAt(0);
      for (let tick = 1; tick <= here; tick += 1) {
        branch.standAt(tick);
        visit(run);
      }
    },
    leave() {
      if (phase === 'ended' || phase === 'ready') return;
      // What is shown of the past is not where the flight stands.
      if (headHash !== null) branch.standAt(branch.head);
      headHash = null;
      run.leave();
      finish();
    },
  };
}
