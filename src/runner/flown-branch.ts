/** The inputs that led to the present state, with snapshots of it once a second: any tick of the branch is at hand. */
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import type { ControlSample, Run, RunSnapshot } from '#shared/scenario/run-types.ts';
import { type PilotAxes, axesInto } from './input/pilot-axes.ts';

export interface FlownBranch {
  /** Tick of the last input. */
  readonly head: number;
  /** After every `run.step`, with the sample flown. */
  add(sample: ControlSample): void;
  /** Puts the run at a tick of the branch; at most one second is integrated again. */
  standAt(tick: number): void;
  /** Forgets what came after a tick. */
  cutAt(tick: number): void;
  /** The axes as they were held at the head, so that controls do not jump. */
  lastSampleInto(axes: PilotAxes): void;
}

export function createFlownBranch(run: Run): FlownBranch {
  const width = 4 + 2 * run.neutralSample().levers.length;
  const scratch = run.neutralSample();
  const engines = scratch.levers.length;
  let inputs = new Int16Array(width * TICK_RATE_HZ * 60);
  let head = 0;
  const snapshots: RunSnapshot[] = [run.save()];

  function writeInto(sample: ControlSample, tick: number): void {
    const at = tick * width;
    sample.stick = inputs[at];
    sample.pedal = inputs[at + 1];
    sample.pitch = inputs[at + 2];
    sample.rudderTrim = inputs[at + 3];
    for (let e = 0; e < engines; e += 1) {
      sample.levers[e] = inputs[at + 4 + e];
      sample.feather[e] = inputs[at + 4 + engines + e];
    }
  }

  return {
    get head() {
      return head;
    },
    add(sample) {
      const at = head * width;
      if (at + width > inputs.length) {
        const longer = new Int16Array(inputs.length * 2);
        longer.set(inputs);
        inputs = longer;
      }
      inputs[at] = sample.stick;
      inputs[at + 1] = sample.pedal;
      inputs[at + 2] = sample.pitch;
      inputs[at + 3] = sample.rudderTrim;
      for (let e = 0; e < engines; e += 1) {
        inputs[at + 4 + e] = sample.levers[e];
        inputs[at + 4 + engines + e] = sample.feather[e];
      }
      head += 1;
      if (head % TICK_RATE_HZ === 0 && run.ended === null) snapshots.push(run.save());
    },
    standAt(tick) {
      if (run.tick <= tick && tick - run.tick < TICK_RATE_HZ) {
        // Forward by less than a snapshot's distance: simply on from here.
      } else {
        const from = snapshots[Math.min(snapshots.length - 1, Math.floor(tick / TICK_RATE_HZ))];
        run.restore(from);
      }
      for (let t = run.tick; t < tick; t += 1) {
        writeInto(scratch, t);
        run.step(scratch);
      }
    },
    cutAt(tick) {
      head = tick;
      snapshots.length = Math.min(snapshots.length, Math.floor(tick / TICK_RATE_HZ) + 1);
    },
    lastSampleInto(axes) {
      if (head === 0) {
        axesInto(axes, run.neutralSample());
        return;
      }
      writeInto(scratch, head - 1);
      axesInto(axes, scratch);
    },
  };
}
