/**
 * The aeroplane that everybody sees, integrated here from its inputs: chunks that were stored, frames between them, and
 * the log of the class for branches and events. Never ahead of the inputs; a state that differs is told.
 */
import type { ChunkContent } from './chunk-codec.ts';
import type { InputFrame } from './class-frames.ts';
import { headTickAt, injectedOn, phaseAt, tickAt, type ClassRun } from './class-state.ts';
import { InputLine } from './input-line.ts';
import type { Run } from './run-types.ts';

/** How long a viewer's picture trails the aeroplane that is flown: the same for all, more than a network's jitter. */
export const VIEW_DELAY_MS = 200;
const KEPT_FRAMES = 600;

export interface Difference {
  tick: number;
  expected: string;
  found: string;
}

export class Follower {
  readonly line: InputLine;
  /** Branch that the inputs belong to. */
  branch = 0;
  /** Ticks are missing between what is known and what arrives: the chunks must be asked for. */
  gap = false;
  private classRun: ClassRun;
  private frames: InputFrame[] = [];
  private readonly expected = new Map<number, string>();

  constructor(
    run: Run,
    classRun: ClassRun,
    private readonly onDifference: (difference: Difference) => void,
  ) {
    this.classRun = classRun;
    this.line = new InputLine(run, (now) => this.check(now));
    this.line.reschedule(injectedOn(classRun, 0));
  }

  /** The log has gone on. */
  update(classRun: ClassRun, serverMs: number): void {
    this.classRun = classRun;
    if (this.branch === classRun.branch) this.settle(serverMs);
    else this.line.reschedule(injectedOn(classRun, this.branch));
    this.takeFrames();
  }

  /** The next stored chunk, in order from the first. */
  addChunk(content: ChunkContent): void {
    if (content.tickCount > 0) {
      if (!this.line.addContent(content)) {
        this.gap = true;
        return;
      }
      this.expect(content.startTick + content.tickCount, content.stateHash);
    }
    for (const mark of content.marks) {
      if (mark.kind === 'branch') this.goToBranch(mark.value ?? 0);
      else if (mark.kind === 'rewind') this.cutAt(mark.value ?? 0);
    }
    this.takeFrames();
  }

  addFrame(frame: InputFrame): void {
    this.frames.push(frame);
    if (this.frames.length > KEPT_FRAMES) this.frames.shift();
    this.takeFrames();
  }

  /** Moves to where the picture shall be at a time, by at most so many ticks. Returns how far it has still to go. */
  advance(serverMs: number, mostTicks = Number.POSITIVE_INFINITY): number {
    const { classRun } = this;
    const standing = phaseAt(classRun, serverMs) === 'frozen' || classRun.overAt !== null;
    const tick = tickAt(classRun, standing ? serverMs : serverMs - VIEW_DELAY_MS);
    if (this.branch !== classRun.branch) this.takeFrames();
    if (standing && this.branch === classRun.branch) this.settle(serverMs);
    const wanted = Math.min(tick, this.line.head);
    const reached = this.line.standAt(wanted, mostTicks);
    return this.line.run.ended === null ? Math.max(0, wanted - reached) : 0;
  }

  /** Forgets everything, to begin again with the first chunk. Frames that have arrived are kept. */
  clear(): void {
    this.expected.clear();
    this.branch = 0;
    this.gap = false;
    this.line.clear();
    this.line.reschedule(injectedOn(this.classRun, 0));
  }

  /** What was flown beyond the tick at which everybody stopped does not count. */
  private settle(serverMs: number): void {
    const phase = phaseAt(this.classRun, serverMs);
    if (phase === 'frozen') this.cutAt(headTickAt(this.classRun, serverMs));
    this.line.reschedule(injectedOn(this.classRun, this.branch));
  }

  private goToBranch(branch: number): void {
    while (this.branch < branch && this.branch + 1 < this.classRun.branches.length) {
      this.branch += 1;
      this.cutAt(this.classRun.branches[this.branch].tick);
      this.line.reschedule(injectedOn(this.classRun, this.branch));
    }
  }

  private cutAt(tick: number): void {
    if (tick >= this.line.head) return;
    this.line.cutAt(tick);
    for (const known of this.expected.keys()) if (known > tick) this.expected.delete(known);
  }

  private takeFrames(): void {
    const waiting: InputFrame[] = [];
    for (const frame of this.frames) {
      if (frame.branch > this.branch) {
        if (frame.branch < this.classRun.branches.length) this.goToBranch(frame.branch);
        else {
          waiting.push(frame);
          continue;
        }
      }
      if (frame.branch < this.branch) continue;
      if (!this.line.addContent(frame.content)) {
        this.gap = true;
        waiting.push(frame);
        continue;
      }
      if (frame.stateHash !== null) this.expect(frame.startTick + frame.tickCount, frame.stateHash);
    }
    this.frames = waiting;
    if (waiting.length === 0) this.gap = false;
  }

  private expect(tick: number, stateHash: string): void {
    if (this.line.run.tick === tick) this.compare(tick, stateHash);
    else if (this.line.run.tick < tick) this.expected.set(tick, stateHash);
  }

  private check(run: Run): void {
    const stateHash = this.expected.get(run.tick);
    if (stateHash === undefined) return;
    this.expected.delete(run.tick);
    this.compare(run.tick, stateHash);
  }

  private compare(tick: number, expected: string): void {
    const found = this.line.run.stateHash();
    if (found !== expected) this.onDifference({ tick, expected, found });
  }
}
