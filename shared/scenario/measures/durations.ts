/** Time spent in a condition. */
import { TICK_S } from '../../model/plant-types.ts';
import type { Signals } from '../signals.ts';
import { AT, Measure, OWN, VALUE } from './measure.ts';
import type { Sampler } from './measure.ts';

export class TimeIn extends Measure {
  readonly sample: Sampler;
  constructor(holds: (s: Signals) => boolean) {
    super(1);
    const { m } = this;
    this.sample = (s, closing) => {
      if (closing || !holds(s)) return;
      if (m[AT] < 0) m[AT] = s.tick;
      // Ticks are counted, so that a time is a whole number of ticks to the last bit.
      m[OWN] += 1;
      m[VALUE] = m[OWN] * TICK_S;
    };
  }
  override open(s: Signals): void {
    super.open(s);
    this.m[VALUE] = 0;
  }
  override now(): number {
    return this.m[VALUE];
  }
}
