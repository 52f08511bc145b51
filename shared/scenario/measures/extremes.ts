/** Greatest values over the window: angles, rates, ball, offsets, force, and losses against the window's start. */
import { signalReader } from '../expression/readers.ts';
import type { NumberReader } from '../expression/readers.ts';
import type { CompiledQuantity } from '../expression/expression.ts';
import { isState, MADE_SIGNAL, STATE_SIGNAL } from '../expression/names.ts';
import type { SignalName } from '../expression/names.ts';
import type { Signals } from '../signals.ts';
import { Measure, OWN, raise } from './measure.ts';
import type { Sampler } from './measure.ts';

/** Greatest magnitude of a signal. */
export class GreatestSignal extends Measure {
  readonly sample: Sampler;
  private readonly read: NumberReader;
  constructor(name: SignalName) {
    super();
    this.read = signalReader(name);
    const { m } = this;
    if (isState(name)) {
      const k = STATE_SIGNAL[name];
      this.sample = (s) => raise(m, Math.abs(s.x[k]), s.tick);
    } else {
      const k = MADE_SIGNAL[name];
      this.sample = (s) => raise(m, Math.abs(s.v[k]), s.tick);
    }
  }
  override now(s: Signals): number {
    return Math.abs(this.read(s));
  }
}

/** Greatest magnitude of something that is worked out. */
export class GreatestMagnitude extends Measure {
  readonly sample: Sampler;
  private readonly read: (s: Signals) => number;
  constructor(read: (s: Signals) => number) {
    super();
    this.read = read;
    const { m } = this;
    this.sample = (s) => raise(m, Math.abs(read(s)), s.tick);
  }
  override now(s: Signals): number {
    return Math.abs(this.read(s));
  }
}

/** Greatest change of a signal from its value at the window's start: either way, or only the loss. */
export class GreatestChange extends Measure {
  readonly sample: Sampler;
  private readonly read: NumberReader;
  private readonly onlyLoss: boolean;
  constructor(name: SignalName, onlyLoss: boolean) {
    super(1);
    this.onlyLoss = onlyLoss;
    const { m } = this;
    const read = signalReader(name);
    this.read = read;
    this.sample = onlyLoss
      ? (s) => raise(m, Math.max(0, m[OWN] - read(s)), s.tick)
      : (s) => raise(m, Math.abs(read(s) - m[OWN]), s.tick);
  }
  override open(s: Signals): void {
    super.open(s);
    this.m[OWN] = this.read(s);
  }
  override now(s: Signals): number {
    const change = this.read(s) - this.m[OWN];
    return this.onlyLoss ? Math.max(0, -change) : Math.abs(change);
  }
}

/** Greatest bank toward the dead side; nothing while no side is dead. */
export class BankDeadSide extends Measure {
  readonly sample: Sampler = (s) => {
    if (s.engines.deadSide !== 0) raise(this.m, this.now(s), s.tick);
  };
  override now(s: Signals): number {
    const side = s.engines.deadSide;
    return side === 0 ? NaN : Math.max(0, -side * s.x[STATE_SIGNAL.phiRad]);
  }
}

/** Greatest value of an expression. */
export class GreatestOfExpression extends Measure {
  readonly sample: Sampler;
  private readonly quantity: CompiledQuantity;
  constructor(quantity: CompiledQuantity) {
    super();
    this.quantity = quantity;
    const { m } = this;
    const { value } = quantity;
    this.sample = (s) => {
      const now = value(s);
      if (Number.isFinite(now)) raise(m, now, s.tick);
    };
  }
  override now(s: Signals): number {
    const value = this.quantity.value(s);
    return Number.isFinite(value) ? value : NaN;
  }
}
