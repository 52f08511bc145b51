/** One criterion in a run: opens and closes its window, feeds its measure, and judges the value against the limit. */
import { TICK_S } from '../model/plant-types.ts';
import { UNITS } from './expression/units.ts';
import { createMeasure } from './measures/create-measure.ts';
import { MEASURE_TABLE } from './measures/measure-table.ts';
import { ticksOf } from './measures/measure.ts';
import type { Measure } from './measures/measure.ts';
import type { CriterionResult, RunningCriterion, Verdict } from './run-types.ts';
import type { ScenarioCriterion, WindowEdge } from './scenario-format.ts';
import type { Signals } from './signals.ts';

/** A value that uses up all but this share of its limit is "near". */
export const NEAR_SHARE = 0.2;

/** Tick at which an event fired; −1 before. */
export interface FiredMark {
  readonly firedTick: number;
}

const WAITING = 0;
const RUNNING = 1;
const DONE = 2;
/** The window closed without ever having opened. */
const MISSED = 3;

interface Edge {
  mark: FiredMark;
  plusTicks: number;
}

const AT_START: FiredMark = { firedTick: 0 };
const NEVER: FiredMark = { firedTick: -1 };

export class CriterionTracker {
  readonly criterion: ScenarioCriterion;
  readonly measure: Measure;
  private readonly from: Edge;
  private readonly to: Edge;
  /** False when only the end of the run closes the window. */
  readonly mayClose: boolean;
  private readonly opensAtEnd: boolean;
  private readonly factor: number;
  private phase = WAITING;

  constructor(criterion: ScenarioCriterion, markOf: (id: string) => FiredMark) {
    this.criterion = criterion;
    this.measure = createMeasure(criterion);
    this.from = edgeOf(criterion.from, markOf);
    this.to = edgeOf(criterion.to, markOf);
    this.mayClose = criterion.to !== 'end';
    this.opensAtEnd = criterion.from === 'end';
    this.factor = UNITS[criterion.limit.unit].factor;
  }

  get isWaiting(): boolean {
    return this.phase === WAITING;
  }
  get isRunning(): boolean {
    return this.phase === RUNNING;
  }

  /** Opens or misses its window when the time has come; true when its phase has changed. `last` at the end of the run. */
  tryOpen(s: Signals, last: boolean): boolean {
    if (this.phase !== WAITING) return false;
    const { mark, plusTicks } = this.from;
    const opens = this.opensAtEnd ? last : mark.firedTick >= 0 && s.tick >= mark.firedTick + plusTicks;
    if (!opens) return false;
    const end = this.to.mark.firedTick;
    if (end >= 0 && s.tick > end + this.to.plusTicks) {
      this.phase = MISSED;
      return true;
    }
    this.phase = RUNNING;
    this.measure.open(s);
    return true;
  }

  /** Samples an open window that an event may close; true when it has closed. */
  sampleBounded(s: Signals): boolean {
    const end = this.to.mark.firedTick;
    const closing = end >= 0 && s.tick >= end + this.to.plusTicks;
    this.measure.sample(s, closing);
    if (closing) this.phase = DONE;
    return closing;
  }

  /** Takes in the last state of a run. */
  finish(s: Signals): void {
    this.tryOpen(s, true);
    if (this.phase !== RUNNING) return;
    this.measure.sample(s, true);
    this.phase = DONE;
  }

  /** The run stopped at a state that was taken in already. */
  stop(): void {
    if (this.phase === RUNNING) this.phase = DONE;
  }

  result(): CriterionResult {
    const { criterion, measure } = this;
    const { id, title, required, limit } = criterion;
    const spec = MEASURE_TABLE[criterion.measure];
    const opened = this.phase === RUNNING || this.phase === DONE;
    const si = opened ? measure.value : NaN;
    const value = Number.isNaN(si) ? null : si / this.factor;
    const note = !opened
      ? undefined
      : value === null && spec.mayNeverCome && this.phase === DONE
        ? 'never'
        : measure.note();
    const base = { id, title, measure: criterion.measure, required, value, limit: { ...limit } };
    if (value === null) {
      const verdict: Verdict = opened && spec.mayNeverCome && this.phase === DONE ? 'not-met' : 'not-reached';
      return withNote({ ...base, margin: null, atS: null, verdict }, note);
    }
    const margin = marginOf(value, limit);
    const atS = measure.at >= 0 ? measure.at * TICK_S : null;
    const verdict: Verdict = note === 'not needed' && margin >= 0 ? 'met' : verdictOf(margin, limit);
    return withNote({ ...base, margin, atS, verdict }, note);
  }

  running(s: Signals): RunningCriterion {
    const now = this.phase === RUNNING || this.phase === DONE ? this.measure.now(s) : NaN;
    return {
      ...this.result(),
      phase: this.phase === WAITING ? 'waiting' : this.phase === RUNNING ? 'running' : 'done',
      now: Number.isNaN(now) ? null : now / this.factor,
    };
  }

  /** Length of what `saveInto` writes. */
  get memoryLength(): number {
    return 1 + this.measure.m.length;
  }
  saveInto(out: Float64Array, at: number): number {
    out[at] = this.phase;
    out.set(this.measure.m, at + 1);
    return at + this.memoryLength;
  }
  restoreFrom(data: Float64Array, at: number): number {
    this.phase = data[at];
    this.measure.m.set(data.subarray(at + 1, at + this.memoryLength));
    return at + this.memoryLength;
  }
}

function edgeOf(edge: WindowEdge, markOf: (id: string) => FiredMark): Edge {
  const id = typeof edge === 'string' ? edge : edge.after;
  const plusTicks = typeof edge === 'string' ? 0 : ticksOf(edge.plus_s);
  return { mark: id === 'start' ? AT_START : id === 'end' ? NEVER : markOf(id), plusTicks };
}

function withNote(result: CriterionResult, note: string | undefined): CriterionResult {
  return note === undefined ? result : { ...result, note };
}

type Limit = ScenarioCriterion['limit'];

/** Distance to the limit in its unit, negative beyond it. */
export function marginOf(value: number, limit: Limit): number {
  if ('max' in limit) return limit.max - value;
  if ('min' in limit) return value - limit.min;
  return Math.min(value - limit.within[0], limit.within[1] - value);
}

/** Beyond the limit, within 20 % of it, or clear of it. A limit of zero has no "near". */
export function verdictOf(margin: number, limit: Limit): Verdict {
  if (!(margin >= 0)) return 'not-met';
  const size =
    'max' in limit
      ? Math.abs(limit.max)
      : 'min' in limit
        ? Math.abs(limit.min)
        : 0.5 * (limit.within[1] - limit.within[0]);
  return size > 0 && margin <= NEAR_SHARE * size ? 'near' : 'met';
}
