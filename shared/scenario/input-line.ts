/**
 * Inputs that lead from the start of a run to its latest tick, and the run itself standing at any tick of them. Shared by
 * who flies in a class and who looks on: going back, branching and learning late of an event all end in the same state.
 */
import { TICK_RATE_HZ } from '../model/plant-types.ts';
import { readSampleInto, type ChunkContent } from './chunk-codec.ts';
import type { ControlSample, InjectedEvent, Run, RunSnapshot } from './run-types.ts';

const SNAPSHOT_TICKS = TICK_RATE_HZ;

export class InputLine {
  /** Number of ticks whose inputs are known. */
  head = 0;
  private inputs: Int16Array;
  private readonly width: number;
  private readonly scratch: ControlSample;
  private readonly snapshots: RunSnapshot[];
  private injected: readonly InjectedEvent[] = [];

  constructor(
    readonly run: Run,
    /** After every tick flown for the first time or again. */
    private readonly onTick: (run: Run) => void = () => undefined,
  ) {
    this.scratch = run.neutralSample();
    this.width = 4 + 2 * this.scratch.levers.length;
    this.inputs = new Int16Array(this.width * TICK_RATE_HZ * 60);
    this.snapshots = [run.save()];
  }

  /** Appends the input of tick `head`. */
  add(sample: ControlSample): void {
    const { width, scratch } = this;
    const at = this.head * width;
    if (at + width > this.inputs.length) {
      const longer = new Int16Array(this.inputs.length * 2);
      longer.set(this.inputs);
      this.inputs = longer;
    }
    const engines = scratch.levers.length;
    this.inputs[at] = sample.stick;
    this.inputs[at + 1] = sample.pedal;
    this.inputs[at + 2] = sample.pitch;
    this.inputs[at + 3] = sample.rudderTrim;
    for (let e = 0; e < engines; e += 1) {
      this.inputs[at + 4 + e] = sample.levers[e];
      this.inputs[at + 4 + engines + e] = sample.feather[e];
    }
    this.head += 1;
  }

  /**
   * Appends what is new in a chunk or frame.
   *
   * @returns False when ticks before it are missing.
   */
  addContent(content: ChunkContent): boolean {
    if (content.startTick > this.head) return false;
    for (let i = this.head - content.startTick; i < content.tickCount; i += 1) {
      readSampleInto(this.scratch, content, i);
      this.add(this.scratch);
    }
    return true;
  }

  sampleInto(sample: ControlSample, tick: number): void {
    const at = tick * this.width;
    const { inputs } = this;
    const engines = sample.levers.length;
    sample.stick = inputs[at];
    sample.pedal = inputs[at + 1];
    sample.pitch = inputs[at + 2];
    sample.rudderTrim = inputs[at + 3];
    for (let e = 0; e < engines; e += 1) {
      sample.levers[e] = inputs[at + 4 + e];
      sample.feather[e] = inputs[at + 4 + engines + e];
    }
  }

  /** The input before `head`, or centred controls. */
  lastSampleInto(sample: ControlSample): void {
    if (this.head > 0) this.sampleInto(sample, this.head - 1);
    else Object.assign(sample, this.run.neutralSample());
  }

  /** Puts the run at a tick, not beyond the inputs, by flying at most `mostTicks`. Returns the tick it stands at. */
  standAt(tick: number, mostTicks = Number.POSITIVE_INFINITY): number {
    const target = Math.max(0, Math.min(tick, this.head));
    const nearest = this.snapshots[Math.min(this.snapshots.length - 1, Math.floor(target / SNAPSHOT_TICKS))];
    if (target < this.run.tick || nearest.tick > this.run.tick) this.run.restore(nearest);
    for (let flown = 0; this.run.tick < target && flown < mostTicks; flown += 1) {
      const before = this.run.tick;
      this.sampleInto(this.scratch, before);
      this.run.step(this.scratch);
      if (this.run.tick === before) break;
      if (this.run.tick === this.snapshots.length * SNAPSHOT_TICKS && this.run.ended === null) {
        this.snapshots.push(this.run.save());
      }
      this.onTick(this.run);
    }
    return this.run.tick;
  }

  /** Forgets the inputs from a tick on. */
  cutAt(tick: number): void {
    if (tick >= this.head) return;
    if (this.run.tick > tick) this.standAt(tick);
    this.head = tick;
    this.forgetAfter(tick);
  }

  /**
   * Takes over the class's list of events. What differs before the present tick is flown again from there.
   *
   * @returns The first tick that differs; null when nothing does.
   */
  reschedule(injected: readonly InjectedEvent[]): number | null {
    const from = firstDifference(this.injected, injected);
    this.injected = injected;
    if (from === null) return null;
    const here = this.run.tick;
    this.forgetAfter(from);
    if (here > from) this.run.restore(this.snapshots[this.snapshots.length - 1]);
    this.run.reschedule(injected);
    this.standAt(here);
    return from;
  }

  /** Back to the start, with nothing known. */
  clear(): void {
    this.forgetAfter(0);
    this.run.restore(this.snapshots[0]);
    this.head = 0;
  }

  private forgetAfter(tick: number): void {
    this.snapshots.length = Math.min(this.snapshots.length, Math.floor(tick / SNAPSHOT_TICKS) + 1);
  }
}

/** The first tick at which two lists of events differ; null when they say the same. */
export function firstDifference(a: readonly InjectedEvent[], b: readonly InjectedEvent[]): number | null {
  let first = Number.POSITIVE_INFINITY;
  const compare = (one: readonly InjectedEvent[], other: readonly InjectedEvent[]): void => {
    for (const { tick, event, until } of one) {
      const twin = other.find((entry) => entry.event.id === event.id && entry.tick === tick);
      if (!twin) first = Math.min(first, tick);
      else if (twin.until !== until)
        first = Math.min(first, twin.until ?? Number.POSITIVE_INFINITY, until ?? Number.POSITIVE_INFINITY);
    }
  };
  compare(a, b);
  compare(b, a);
  return Number.isFinite(first) ? first : null;
}
