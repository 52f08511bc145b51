/** Remarks of a run: how long it was outside the data and why, and pedal reversals. */
import { TICK_S } from '../model/plant-types.ts';
import { DEG } from '../units/constants.ts';
import { plainNumber } from './describe.ts';
import { PedalReversals } from './measures/reaction.ts';
import type { Signals } from './signals.ts';

const SIDESLIP_RAD = 15 * DEG;
const BANK_RAD = 60 * DEG;

const CAUSES = [
  'sideslip beyond 15°',
  'fin beyond its stall',
  'lift at its limit',
  'bank beyond 60°',
  'lift coefficient beyond the data',
] as const;
/** For every cause its ticks and its first tick, the total last. */
const LENGTH = 2 * (CAUSES.length + 1);
const TOTAL = 2 * CAUSES.length;

export class ValidityWatch {
  private readonly counts = new Float64Array(LENGTH);
  private readonly reversals = new PedalReversals();

  constructor(s: Signals) {
    this.reversals.open(s);
  }

  /** Takes in one tick. */
  sample(s: Signals): void {
    this.reversals.sample(s, false);
    const now = s.full();
    if (!now.outsideData) return;
    // The air's sideslip counts; the observation says so without naming the cause.
    const airBeta = now.betaRad - now.gustLateralMps / now.tasMps;
    const sideslip = Math.abs(airBeta) > SIDESLIP_RAD;
    const bank = Math.abs(now.phiRad) > BANK_RAD;
    this.count(TOTAL, s.tick);
    if (sideslip) this.count(0, s.tick);
    if (now.finStalled) this.count(2, s.tick);
    if (now.stallWarning) this.count(4, s.tick);
    if (bank) this.count(6, s.tick);
    if (!sideslip && !bank && !now.finStalled && !now.stallWarning) this.count(8, s.tick);
  }

  private count(at: number, tick: number): void {
    if (this.counts[at] === 0) this.counts[at + 1] = tick;
    this.counts[at] += 1;
  }

  /** One line per remark. */
  lines(): string[] {
    const lines: string[] = [];
    const time = (at: number): string =>
      `${plainNumber(this.counts[at] * TICK_S)} s, first at ${plainNumber(this.counts[at + 1] * TICK_S)} s`;
    if (this.counts[TOTAL] > 0) {
      const causes = CAUSES.filter((_, i) => this.counts[2 * i] > 0);
      lines.push(`Outside the data for ${time(TOTAL)}: ${causes.join(', ')}.`);
      CAUSES.forEach((cause, i) => {
        if (causes.length > 1 && this.counts[2 * i] > 0) lines.push(`Outside the data, ${cause}: ${time(2 * i)}.`);
      });
    }
    const swings = this.reversals.value;
    if (swings > 0) {
      lines.push(
        `Rapid pedal reversals: ${swings}. In life they can exceed the structure's strength; never alternate full rudder.`,
      );
    }
    return lines;
  }

  static readonly MEMORY = LENGTH + new PedalReversals().m.length;
  saveInto(out: Float64Array, at: number): number {
    out.set(this.counts, at);
    out.set(this.reversals.m, at + LENGTH);
    return at + ValidityWatch.MEMORY;
  }
  restoreFrom(data: Float64Array, at: number): number {
    this.counts.set(data.subarray(at, at + LENGTH));
    this.reversals.m.set(data.subarray(at + LENGTH, at + ValidityWatch.MEMORY));
    return at + ValidityWatch.MEMORY;
  }
}
