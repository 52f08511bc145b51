/**
 * One's own aeroplane in a class, or the demonstration's while one has its controls: flown by the class clock, recorded
 * in chunks, sent on in frames. Stops, rewinds and branches exactly where the log says, also when word of it comes late.
 */
import { TICK_RATE_HZ } from '../model/plant-types.ts';
import { channelCount } from './chunk-codec.ts';
import { encodeFrame, FRAME_TICKS, LARGEST_FRAME_TICKS } from './class-frames.ts';
import { headTickAt, injectedOn, phaseAt, tickAt, type ClassRun } from './class-state.ts';
import { InputLine } from './input-line.ts';
import { createRecorder, type ChunkContent, type RecordedChunk, type Recorder } from './recording.ts';
import type { ControlSample, Run } from './run-types.ts';

/** Ticks are recorded this late, so that a stop or an event that was learnt of late changes nothing recorded. */
const HOLD_TICKS = 60;
/** A longer absence is flown with centred controls. */
const ABSENCE_TICKS = TICK_RATE_HZ;
/** A freeze of the scenario is waited for so long. */
const WAIT_TICKS = 3 * TICK_RATE_HZ;
/** Ticks that are sent in frames however late; older ones come with the chunks. */
const LATE_FRAME_TICKS = 2 * TICK_RATE_HZ;

export interface ClassFlightEvents {
  chunk: (chunk: RecordedChunk) => void;
  /** A frame for those who look on; called only while `broadcast` is set. */
  frame?: (frame: string) => void;
  /** After every tick, also one flown again. */
  tick?: (run: Run) => void;
  /** A freeze event of the scenario in a demonstration; the flight waits for the class clock to stop here (run:stands). */
  stands?: (tick: number) => void;
  ended?: () => void;
}

export interface ClassFlightSetup {
  run: Run;
  classRun: ClassRun;
  /** Who flies: when a demonstration's controls go to another, this flight ends there. */
  member: string;
  /** Where the recording stands (AttemptHold), and what it holds up to there. */
  hold: { chunkKey: string; nextIndex: number; lastHash: string };
  recorded: readonly ChunkContent[];
  /** Ticks that the demonstration was flown beyond the recording by whoever had the controls before. */
  flown?: (line: InputLine) => void;
  events: ClassFlightEvents;
}

export class ClassFlight {
  readonly line: InputLine;
  broadcast = false;
  chunkCount: number;
  branch = 0;
  /** The run is over, or another has the controls: the last chunk has been handed on. */
  finished = false;
  private classRun: ClassRun;
  private readonly member: string;
  private readonly recorder: Recorder;
  private readonly events: ClassFlightEvents;
  private readonly sample: ControlSample;
  private readonly hashes = new Map<number, string>();
  private recordedHead = 0;
  /** Ticks in the chunk being filled. */
  private pending = 0;
  private framedHead = 0;
  private waitsAt: number | null = null;
  private flushed = false;

  constructor({ run, classRun, member, hold, recorded, flown, events }: ClassFlightSetup) {
    this.classRun = classRun;
    this.member = member;
    this.events = events;
    this.sample = run.neutralSample();
    this.line = new InputLine(run, (now) => this.flew(now));
    this.line.reschedule(injectedOn(classRun, 0));
    this.chunkCount = hold.nextIndex;
    for (const content of recorded) {
      this.line.addContent(content);
      for (const mark of content.marks) {
        if (mark.kind === 'branch') this.toBranch(mark.value ?? 0);
        else if (mark.kind === 'rewind') this.line.cutAt(mark.value ?? 0);
      }
    }
    this.recordedHead = this.line.head;
    flown?.(this.line);
    this.framedHead = this.line.head;
    this.recorder = createRecorder({
      attemptKeyHex: hold.chunkKey,
      engineCount: run.plant.engineCount,
      from: { index: hold.nextIndex, hash: hold.lastHash, tick: this.recordedHead },
    });
  }

  /** The log has gone on. */
  update(classRun: ClassRun): void {
    this.classRun = classRun;
    if (classRun.branch === this.branch) this.line.reschedule(injectedOn(classRun));
  }

  /**
   * Flies on to the class clock's tick, by at most so many ticks.
   *
   * @param serverMs  Time of the server.
   * @param input     Writes the pilot's controls for the next tick.
   * @returns         Ticks still to go.
   */
  advance(serverMs: number, input: (sample: ControlSample) => void, mostTicks = 4 * TICK_RATE_HZ): number {
    const { classRun, line } = this;
    if (this.finished) return 0;
    const stands = phaseAt(classRun, serverMs) === 'frozen' || classRun.overAt !== null;
    if (classRun.branch !== this.branch) this.branchOff();
    const handOver = handOverTick(classRun, this.member);
    const head = Math.min(headTickAt(classRun, serverMs), handOver);
    if (stands || head === handOver) this.stopAt(head);
    // The class clock has not stopped for it: it will not any more.
    if (this.waitsAt !== null && head - this.waitsAt > WAIT_TICKS) this.waitsAt = null;
    const target = stands || this.waitsAt === null ? head : Math.min(head, this.waitsAt);
    line.standAt(line.head);
    const behind = target - line.head;
    let flown = 0;
    while (line.head < target && flown < mostTicks && line.run.ended === null) {
      if (target - line.head > ABSENCE_TICKS && behind > ABSENCE_TICKS) this.handsOff();
      else input(this.sample);
      line.add(this.sample);
      line.standAt(line.head);
      flown += 1;
      if (line.run.freezeRequested && this.events.stands && !stands && classRun.mode === 'demonstration') {
        this.waitsAt = line.head;
        this.events.stands(line.head);
        break;
      }
    }
    this.sendFrames(stands);
    this.record(stands || line.run.ended !== null ? line.head : line.head - HOLD_TICKS);
    const last = classRun.overAt !== null || head === handOver;
    // An aeroplane that has met its end waits: the class may go back to before it.
    if (last && (line.head >= head || line.run.ended !== null)) this.finish();
    else if (stands) {
      this.sayFrozen();
      line.standAt(tickAt(classRun, serverMs));
    } else if (line.run.ended !== null) this.flush();
    else this.flushed = false;
    return line.run.ended === null ? Math.max(0, target - line.head) : 0;
  }

  /** Records what is flown and ends the recording: the run is over, or another takes the controls. */
  finish(): void {
    if (this.finished) return;
    this.line.standAt(this.line.head);
    this.record(this.line.head);
    this.handOn(this.recorder.finish(this.line.run.stateHash()));
    this.finished = true;
    this.events.ended?.();
  }

  private handsOff(): void {
    this.line.lastSampleInto(this.sample);
    this.sample.stick = 0;
    this.sample.pedal = 0;
    this.sample.pitch = 0;
  }

  private flew(run: Run): void {
    const chunkEnd = this.recordedHead - this.pending + TICK_RATE_HZ;
    if (run.tick % TICK_RATE_HZ === 0 || run.tick === chunkEnd) this.hashes.set(run.tick, run.stateHash());
    this.events.tick?.(run);
  }

  private record(upTo: number): void {
    const { line } = this;
    while (this.recordedHead < Math.min(upTo, line.head)) {
      line.sampleInto(this.sample, this.recordedHead);
      this.recorder.add(this.sample, this.recordedHead);
      this.recordedHead += 1;
      this.pending += 1;
      if (this.pending === TICK_RATE_HZ) {
        this.handOn(this.recorder.takeChunk(this.hashAt(this.recordedHead)));
        for (const tick of this.hashes.keys()) if (tick < this.recordedHead) this.hashes.delete(tick);
      }
    }
  }

  private hashAt(tick: number): string {
    const known = this.hashes.get(tick);
    if (known !== undefined) return known;
    const here = this.line.run.tick;
    this.line.standAt(tick);
    const stateHash = this.line.run.stateHash();
    this.line.standAt(here);
    return stateHash;
  }

  private handOn(chunk: RecordedChunk | null): void {
    if (!chunk) return;
    this.pending = 0;
    this.chunkCount = chunk.index + 1;
    this.events.chunk(chunk);
  }

  /** Drops what was flown beyond the tick at which everybody stopped. */
  private stopAt(tick: number): void {
    if (this.line.head <= tick) return;
    if (this.recordedHead > tick) {
      this.recorder.mark({ kind: 'rewind', tick: this.recordedHead, value: tick });
      this.handOn(this.recorder.cut(this.hashAt(this.recordedHead)));
      this.recordedHead = tick;
    }
    this.line.cutAt(tick);
    this.framedHead = Math.min(this.framedHead, tick);
  }

  private branchOff(): void {
    while (this.branch < this.classRun.branch) {
      const next = this.classRun.branches[this.branch + 1];
      const end = Math.min(this.line.head, Math.max(this.recordedHead, next.tick));
      this.record(Math.min(this.line.head, next.tick));
      this.recorder.mark({ kind: 'branch', tick: this.recordedHead, value: this.branch + 1 });
      this.recorder.mark({ kind: 'rewind', tick: this.recordedHead, value: Math.min(next.tick, this.recordedHead) });
      this.handOn(this.recorder.cut(this.hashAt(this.recordedHead)));
      this.recordedHead = Math.min(next.tick, end);
      this.toBranch(this.branch + 1);
      this.framedHead = Math.min(this.framedHead, this.line.head);
    }
    this.waitsAt = null;
    this.flushed = false;
  }

  private toBranch(branch: number): void {
    this.branch = branch;
    this.line.cutAt(this.classRun.branches[branch]?.tick ?? 0);
    this.line.reschedule(injectedOn(this.classRun, branch));
  }

  private sayFrozen(): void {
    this.waitsAt = null;
    if (!this.flushed) this.recorder.mark({ kind: 'freeze', tick: this.line.head });
    this.flush();
  }

  /** Hands on what is recorded, however short the chunk. */
  private flush(): void {
    if (this.flushed) return;
    this.flushed = true;
    this.handOn(this.recorder.cut(this.hashAt(this.line.head)));
  }

  private sendFrames(all: boolean): void {
    const { line } = this;
    if (!this.broadcast || !this.events.frame) {
      this.framedHead = line.head;
      return;
    }
    // After an absence only the last of it is sent; who looks on gets the rest from the chunks.
    this.framedHead = Math.max(this.framedHead, line.head - LATE_FRAME_TICKS);
    while (line.head - this.framedHead >= FRAME_TICKS || (all && line.head > this.framedHead)) {
      const startTick = this.framedHead;
      const second = (Math.floor(startTick / TICK_RATE_HZ) + 1) * TICK_RATE_HZ;
      const most = line.head - startTick > LARGEST_FRAME_TICKS ? LARGEST_FRAME_TICKS : FRAME_TICKS;
      const end = Math.min(line.head, startTick + most, second);
      const engineCount = this.sample.levers.length;
      const channels = Array.from({ length: channelCount(engineCount) }, () => new Int16Array(end - startTick));
      for (let tick = startTick; tick < end; tick += 1) {
        line.sampleInto(this.sample, tick);
        const { stick, pedal, pitch, rudderTrim, levers, feather } = this.sample;
        [stick, pedal, pitch, rudderTrim, ...levers, ...feather].forEach((value, c) => {
          channels[c][tick - startTick] = value;
        });
      }
      const stateHash = end % TICK_RATE_HZ === 0 ? this.hashAt(end) : null;
      this.events.frame(
        encodeFrame({
          branch: this.branch,
          startTick,
          tickCount: end - startTick,
          engineCount,
          channels,
          stateHash,
        }),
      );
      this.framedHead = end;
    }
  }
}

/** The tick from which another flies the demonstration; infinite while one has the controls, or flies one's own. */
export function handOverTick(run: ClassRun, member: string): number {
  const last = run.controls.at(-1);
  return last === undefined || last.member === member ? Number.POSITIVE_INFINITY : last.tick;
}
