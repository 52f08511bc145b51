/** The pilot's reaction: first correct pedal, wrong pedal, yaw arrested, pedal reversals. */
import { TICK_S } from '../../model/plant-types.ts';
import { DEG } from '../../units/constants.ts';
import { MADE_SIGNAL, STATE_SIGNAL } from '../expression/names.ts';
import type { Signals } from '../signals.ts';
import { AT, happened, Measure, OWN, ticksOf, VALUE } from './measure.ts';
import type { Sampler } from './measure.ts';

/** Pedal that counts as a reaction, and how long it must be held. */
const PEDAL_SHARE = 0.1;
const HELD_TICKS = ticksOf(0.2);
/** Yaw that needs arresting, yaw that counts as arrested, and for how long. */
const YAWING_RADS = 2 * DEG;
const ARRESTED_RADS = 1 * DEG;
const ARRESTED_TICKS = ticksOf(1);
/** A swing of the pedal and the time within which it counts. */
const SWING_SHARE = 0.6;
const SWING_TICKS = ticksOf(3);

/** Direction of correct pedal: toward the live side, or against the yaw when no engine has failed; 0 when neither is known. */
function correctSide(s: Signals): number {
  const side = s.engines.deadSide;
  if (side !== 0) return side;
  return s.x[STATE_SIGNAL.rRadS] > 0 ? -1 : s.x[STATE_SIGNAL.rRadS] < 0 ? 1 : 0;
}

export class FirstCorrectPedal extends Measure {
  constructor() {
    super(2);
  }
  override open(s: Signals): void {
    super.open(s);
    this.m[OWN] = s.v[MADE_SIGNAL.pedal];
    this.m[OWN + 1] = -1;
  }
  readonly sample: Sampler = (s, closing) => {
    const m = this.m;
    if (closing || m[AT] >= 0) return;
    if ((s.v[MADE_SIGNAL.pedal] - m[OWN]) * correctSide(s) < PEDAL_SHARE) {
      m[OWN + 1] = -1;
      return;
    }
    if (m[OWN + 1] < 0) m[OWN + 1] = s.tick;
    if (s.tick - m[OWN + 1] + 1 >= HELD_TICKS) happened(m, m[OWN + 1]);
  };
  override now(s: Signals): number {
    return this.waited(s);
  }
}

export class WrongPedalTime extends Measure {
  constructor() {
    super(2);
  }
  override open(s: Signals): void {
    super.open(s);
    this.m[OWN] = s.v[MADE_SIGNAL.pedal];
    this.m[VALUE] = 0;
  }
  readonly sample: Sampler = (s, closing) => {
    if (closing || (s.v[MADE_SIGNAL.pedal] - this.m[OWN]) * correctSide(s) > -PEDAL_SHARE) return;
    this.m[OWN + 1] += 1;
    this.m[VALUE] = this.m[OWN + 1] * TICK_S;
    this.m[AT] = s.tick;
  };
  override now(): number {
    return this.m[VALUE];
  }
}

export class YawArrested extends Measure {
  constructor() {
    super(2);
  }
  override open(s: Signals): void {
    super.open(s);
    this.m[OWN] = 0; // 1 once the yaw rate has exceeded 2°/s
    this.m[OWN + 1] = -1; // first tick of the present quiet stretch
  }
  readonly sample: Sampler = (s) => {
    const m = this.m;
    if (m[AT] >= 0) return;
    const rate = Math.abs(s.x[STATE_SIGNAL.rRadS]);
    if (rate > YAWING_RADS) m[OWN] = 1;
    if (m[OWN] === 0 || rate >= ARRESTED_RADS) {
      m[OWN + 1] = -1;
      return;
    }
    if (m[OWN + 1] < 0) m[OWN + 1] = s.tick;
    if (s.tick - m[OWN + 1] >= ARRESTED_TICKS) happened(m, m[OWN + 1]);
  };
  override get value(): number {
    return this.m[OWN] === 0 ? 0 : this.m[VALUE];
  }
  override now(s: Signals): number {
    return this.m[OWN] === 0 ? 0 : this.waited(s);
  }
  override note(): string | undefined {
    return this.m[OWN] === 0 ? 'not needed' : undefined;
  }
}

/** Swings from over 60 % one way to over 60 % the other within 3 s. */
export class PedalReversals extends Measure {
  constructor() {
    super(2);
  }
  override open(s: Signals): void {
    super.open(s);
    this.m[VALUE] = 0;
    this.m[OWN] = 0; // side last beyond 60 %
    this.m[OWN + 1] = -1; // last tick there
  }
  readonly sample: Sampler = (s) => {
    const m = this.m;
    const side = s.v[MADE_SIGNAL.pedal] > SWING_SHARE ? 1 : s.v[MADE_SIGNAL.pedal] < -SWING_SHARE ? -1 : 0;
    if (side === 0) return;
    if (m[OWN] === -side && s.tick - m[OWN + 1] <= SWING_TICKS) {
      m[VALUE] += 1;
      m[AT] = s.tick;
    }
    m[OWN] = side;
    m[OWN + 1] = s.tick;
  };
  override now(): number {
    return this.m[VALUE];
  }
}
