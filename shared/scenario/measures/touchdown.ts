/** What is read once, in the tick of the touchdown. */
import type { Signals } from '../signals.ts';
import { Measure, raise } from './measure.ts';
import type { Sampler } from './measure.ts';

export class AtTouchdown extends Measure {
  readonly sample: Sampler;
  private readonly read: (s: Signals) => number;
  constructor(read: (s: Signals) => number) {
    super();
    this.read = read;
    const { m } = this;
    this.sample = (s) => {
      if (s.ended === 'touchdown') raise(m, read(s), s.tick);
    };
  }
  override now(s: Signals): number {
    return this.read(s);
  }
}
