/** What brings control back or takes it away: live lever, nose, speed, feathering, the wrong engine, climb. */
import { TICK_S } from '../../model/plant-types.ts';
import { DEG } from '../../units/constants.ts';
import { MADE_SIGNAL, STATE_SIGNAL } from '../expression/names.ts';
import type { Signals } from '../signals.ts';
import { AT, happened, Measure, OPENED, OWN, VALUE } from './measure.ts';
import type { Sampler } from './measure.ts';

const LEVER_SHARE = 0.2;
const NOSE_RAD = 3 * DEG;
/** A lever at or below this share of its travel shuts its engine (ours). */
const SHUT_LEVER = 0.02;

/** Mean lever of the engines that have not failed; NaN when none is live. */
function liveLever(s: Signals): number {
  const { levers } = s.full();
  let sum = 0;
  let count = 0;
  for (let i = 0; i < levers.length; i++) {
    if (s.engines.failure[i] !== 0) continue;
    sum += levers[i];
    count++;
  }
  return sum / count;
}

/** A condition that is waited for: the value is the time since the window opened. */
abstract class TimeUntil extends Measure {
  protected abstract reached(s: Signals): boolean;
  readonly sample: Sampler = (s) => {
    if (this.m[AT] < 0 && this.reached(s)) happened(this.m, s.tick);
  };
  override now(s: Signals): number {
    return this.waited(s);
  }
}

export class LeverReduced extends TimeUntil {
  constructor() {
    super(1);
  }
  override open(s: Signals): void {
    super.open(s);
    this.m[OWN] = liveLever(s);
  }
  protected override reached(s: Signals): boolean {
    // The last bits of a sum of levers must not decide about "20 %".
    return liveLever(s) <= this.m[OWN] - LEVER_SHARE + 1e-4;
  }
}

export class NoseLowered extends TimeUntil {
  constructor() {
    super(1);
  }
  override open(s: Signals): void {
    super.open(s);
    this.m[OWN] = s.x[STATE_SIGNAL.thetaRad];
  }
  protected override reached(s: Signals): boolean {
    return s.x[STATE_SIGNAL.thetaRad] <= this.m[OWN] - NOSE_RAD;
  }
}

export class SpeedRegained extends TimeUntil {
  private readonly aboveMps: number;
  constructor(aboveMps: number) {
    super();
    this.aboveMps = aboveMps;
  }
  protected override reached(s: Signals): boolean {
    return s.v[MADE_SIGNAL.casMps] > this.aboveMps;
  }
}

/** Every engine that has failed is feathered, by event or by the pilot's switch. */
export class FeatheredWithin extends TimeUntil {
  protected override reached(s: Signals): boolean {
    const { failure, feathered } = s.engines;
    const switched = s.plant.inputs.feather;
    let dead = 0;
    for (let i = 0; i < failure.length; i++) {
      if (failure[i] !== 1) continue;
      dead++;
      if (feathered[i] === 0 && switched[i] === 0) return false;
    }
    return dead > 0;
  }
}

/** Live engines feathered, or shut by their lever once another engine has failed. */
export class WrongEngine extends Measure {
  private static readonly MOST_ENGINES = 8;
  constructor() {
    super(2 * WrongEngine.MOST_ENGINES);
  }
  override open(s: Signals): void {
    super.open(s);
    this.m[VALUE] = 0;
    const { levers } = s.full();
    for (let i = 0; i < levers.length; i++) this.m[OWN + i] = levers[i];
  }
  readonly sample: Sampler = (s) => {
    const m = this.m;
    const { failure, feathered, anyFailed } = s.engines;
    const { levers } = s.full();
    const switched = s.plant.inputs.feather;
    for (let i = 0; i < levers.length; i++) {
      const counted = OWN + WrongEngine.MOST_ENGINES + i;
      if (failure[i] !== 0 || m[counted] !== 0) continue;
      const shut = anyFailed && levers[i] <= SHUT_LEVER && m[OWN + i] > SHUT_LEVER;
      if (!shut && feathered[i] === 0 && switched[i] === 0) continue;
      m[counted] = 1;
      m[VALUE] += 1;
      if (m[AT] < 0) m[AT] = s.tick;
    }
  };
  override now(): number {
    return this.m[VALUE];
  }
}

/** Mean rate of climb from the window's start to now. */
export class ClimbRate extends Measure {
  constructor() {
    super(1);
  }
  override open(s: Signals): void {
    super.open(s);
    this.m[OWN] = s.x[STATE_SIGNAL.heightM];
  }
  readonly sample: Sampler = (s) => {
    const seconds = (s.tick - this.m[OPENED]) * TICK_S;
    if (seconds <= 0) return;
    this.m[VALUE] = (s.x[STATE_SIGNAL.heightM] - this.m[OWN]) / seconds;
    this.m[AT] = s.tick;
  };
  override now(s: Signals): number {
    return s.full().verticalSpeedMps;
  }
}
