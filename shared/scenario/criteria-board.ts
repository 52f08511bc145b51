/** All criteria of a run. Those with an open window are kept as a plain list of closures: they run 120 times a second. */
import { CriterionTracker } from './criterion-tracker.ts';
import type { FiredMark } from './criterion-tracker.ts';
import type { Sampler } from './measures/measure.ts';
import type { ScenarioCriterion } from './scenario-format.ts';
import type { Signals } from './signals.ts';

export class CriteriaBoard {
  readonly trackers: readonly CriterionTracker[];
  readonly memoryLength: number;
  private waiting: CriterionTracker[] = [];
  /** Open windows that an event may close, and those that only the end of the run closes. */
  private bounded: CriterionTracker[] = [];
  private free: Sampler[] = [];

  constructor(criteria: readonly ScenarioCriterion[], markOf: (id: string, criterion: string) => FiredMark) {
    this.trackers = criteria.map((criterion) => new CriterionTracker(criterion, (id) => markOf(id, criterion.id)));
    this.memoryLength = this.trackers.reduce((sum, tracker) => sum + tracker.memoryLength, 0);
    this.sort();
  }

  private sort(): void {
    this.waiting = this.trackers.filter((tracker) => tracker.isWaiting);
    const open = this.trackers.filter((tracker) => tracker.isRunning);
    this.bounded = open.filter((tracker) => tracker.mayClose);
    this.free = open.filter((tracker) => !tracker.mayClose).map((tracker) => tracker.measure.sample);
  }

  /** Takes in the present tick, after its events have fired. */
  update(s: Signals): void {
    const { waiting } = this;
    let changed = false;
    for (let i = 0; i < waiting.length; i++) if (waiting[i].tryOpen(s, false)) changed = true;
    if (changed) this.sort();
    const { free, bounded } = this;
    for (let i = 0; i < free.length; i++) free[i](s, false);
    changed = false;
    for (let i = 0; i < bounded.length; i++) if (bounded[i].sampleBounded(s)) changed = true;
    if (changed) this.sort();
  }

  /** Takes in the last state of a run. */
  finish(s: Signals): void {
    for (const tracker of this.trackers) tracker.finish(s);
    this.sort();
  }
  /** The run stopped at a state that was taken in already. */
  stop(): void {
    for (const tracker of this.trackers) tracker.stop();
    this.sort();
  }

  saveInto(out: Float64Array, from: number): number {
    let at = from;
    for (const tracker of this.trackers) at = tracker.saveInto(out, at);
    return at;
  }
  restoreFrom(data: Float64Array, from: number): number {
    let at = from;
    for (const tracker of this.trackers) at = tracker.restoreFrom(data, at);
    this.sort();
    return at;
  }
}
