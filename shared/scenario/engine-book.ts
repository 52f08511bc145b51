/** Which engines events have failed, and on which side the thrust is missing. */
import type { Aircraft } from '../model/aircraft.ts';

/** A missing moment below this share of the largest single one counts as none. */
const EVEN = 1e-9;

export class EngineBook {
  /** The aircraft in the configuration and loading of the start. */
  readonly startAircraft: Aircraft;
  /** Thrust lost per engine, 0 … 1, by failure or by an event that feathers. */
  private readonly loss: Float64Array;
  /** 0 healthy, 1 failed, 3 partial; as Observation.engineState without feathering. */
  readonly failure: Uint8Array;
  /** 1 where an event has feathered the engine. */
  readonly feathered: Uint8Array;
  /** +1 when the left side is dead, −1 right, 0 none. */
  deadSide: -1 | 0 | 1 = 0;
  anyFailed = false;

  constructor(aircraft: Aircraft) {
    const n = aircraft.engines.length;
    this.startAircraft = aircraft;
    this.loss = new Float64Array(n);
    this.failure = new Uint8Array(n);
    this.feathered = new Uint8Array(n);
  }

  fail(i: number, feathered: boolean): void {
    this.failure[i] = 1;
    this.loss[i] = 1;
    if (feathered) this.feathered[i] = 1;
    this.settle();
  }
  failPartly(i: number, fraction: number): void {
    this.failure[i] = 3;
    this.loss[i] = 1 - fraction;
    this.settle();
  }
  feather(i: number): void {
    this.feathered[i] = 1;
    this.loss[i] = 1;
    this.settle();
  }
  restore(i: number): void {
    this.failure[i] = 0;
    this.feathered[i] = 0;
    this.loss[i] = 0;
    this.settle();
  }

  save(): { loss: Float64Array; failure: Uint8Array; feathered: Uint8Array } {
    return { loss: this.loss.slice(), failure: this.failure.slice(), feathered: this.feathered.slice() };
  }
  reset(kept: { loss: Float64Array; failure: Uint8Array; feathered: Uint8Array }): void {
    this.loss.set(kept.loss);
    this.failure.set(kept.failure);
    this.feathered.set(kept.feathered);
    this.settle();
  }

  /** The side follows the yawing moment of the thrust that is missing: its sign holds from the first tick of a failure. */
  private settle(): void {
    const { engines } = this.startAircraft;
    let moment = 0;
    let largest = 0;
    this.anyFailed = false;
    for (let i = 0; i < engines.length; i++) {
      if (this.loss[i] > 0 || this.failure[i] !== 0) this.anyFailed = true;
      const arm = engines[i].yM * engines[i].staticThrustN;
      moment += this.loss[i] * arm;
      largest = Math.max(largest, Math.abs(arm));
    }
    this.deadSide = Math.abs(moment) <= EVEN * largest ? 0 : moment < 0 ? 1 : -1;
  }
}
