/** What every measure is: a small state machine over the ticks of its window, with its memory in one array. */
import { TICK_S } from '../../model/plant-types.ts';
import type { Signals } from '../signals.ts';

/** One tick of a window. A closure of each measure, not a method: a call by name to one of thirty classes costs more. */
export type Sampler = (s: Signals, closing: boolean) => void;

/** Places in a measure's memory that all share; a measure's own follow from OWN. */
export const VALUE = 0;
export const AT = 1;
export const OPENED = 2;
export const OWN = 3;

export abstract class Measure {
  /** Everything that changes from tick to tick; copied by snapshots. */
  readonly m: Float64Array;

  constructor(own = 0) {
    this.m = new Float64Array(OWN + own);
    this.clear();
  }

  /** Back to before the window. */
  clear(): void {
    this.m.fill(0);
    this.m[VALUE] = NaN;
    this.m[AT] = -1;
  }

  /** First tick of the window; `sample` follows for the same tick. */
  open(s: Signals): void {
    this.m[OPENED] = s.tick;
  }
  /** Every tick of the window; `closing` at its last, whose inputs no longer act inside it. */
  abstract readonly sample: Sampler;

  /** SI value so far; NaN when there is none. */
  get value(): number {
    return this.m[VALUE];
  }
  /** Tick of the extreme or of the happening; −1 when there is none. */
  get at(): number {
    return this.m[AT];
  }
  /** Present value of the measured quantity in SI; NaN when it is not defined. */
  abstract now(s: Signals): number;
  /** Remark for the result, such as "not needed". */
  note(): string | undefined {
    return undefined;
  }

  protected get hasHappened(): boolean {
    return this.m[AT] >= 0;
  }
  /** Seconds waited so far, or the value once it happened. */
  protected waited(s: Signals): number {
    return this.hasHappened ? this.m[VALUE] : (s.tick - this.m[OPENED]) * TICK_S;
  }
}

/** Keeps the larger value with its tick; a value that is not a number counts as none. */
export function raise(m: Float64Array, value: number, tick: number): void {
  if (value > m[VALUE] || (m[VALUE] !== m[VALUE] && value === value)) {
    m[VALUE] = value;
    m[AT] = tick;
  }
}

/** Notes that what was waited for happened at `tick`; the value is the time since the window opened. */
export function happened(m: Float64Array, tick: number): void {
  m[VALUE] = (tick - m[OPENED]) * TICK_S;
  m[AT] = tick;
}

/** Ticks in a stretch of seconds. */
export function ticksOf(seconds: number): number {
  return Math.round(seconds / TICK_S);
}
