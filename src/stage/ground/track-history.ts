/**
 * Where the aeroplane has been, on a fixed grid of run time: ten places a second.
 * Places come from the observations drawn, or all at once from a replay; a seek back keeps what lies ahead until it is flown anew.
 */
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';

export const TICKS_PER_SLOT = 12;
export const SLOTS_PER_SECOND = TICK_RATE_HZ / TICKS_PER_SLOT;
/** The longest run kept: 30 minutes. */
const MAX_SLOTS = 30 * 60 * SLOTS_PER_SECOND;
/** Places further apart than this are a jump, not a way flown: 0.3 s. */
const LONGEST_STEP_TICKS = 36;

/** A whole track, one place per tick given; for replays. */
export interface TrackSamples {
  ticks: ArrayLike<number>;
  northM: ArrayLike<number>;
  eastM: ArrayLike<number>;
  heightAboveRunwayM: ArrayLike<number>;
}

export class TrackHistory {
  /** Scene coordinates x, y, z per slot. */
  readonly places = new Float32Array(MAX_SLOTS * 3);
  private readonly known = new Uint8Array(MAX_SLOTS);
  private lastTick = Number.NaN;
  private lastNorthM = 0;
  private lastEastM = 0;
  private lastHeightM = 0;

  /** Notes a place; slots passed since the last place, when that was less than 0.3 s ago, are set between the two. */
  note(tick: number, northM: number, eastM: number, heightM: number): void {
    const passed = tick - this.lastTick;
    if (passed > 0 && passed <= LONGEST_STEP_TICKS) {
      for (let slot = Math.floor(this.lastTick / TICKS_PER_SLOT) + 1; slot * TICKS_PER_SLOT <= tick; slot++) {
        const t = (slot * TICKS_PER_SLOT - this.lastTick) / passed;
        this.set(
          slot,
          this.lastNorthM + (northM - this.lastNorthM) * t,
          this.lastEastM + (eastM - this.lastEastM) * t,
          this.lastHeightM + (heightM - this.lastHeightM) * t,
        );
      }
    } else if (tick % TICKS_PER_SLOT === 0) {
      this.set(tick / TICKS_PER_SLOT, northM, eastM, heightM);
    }
    this.lastTick = tick;
    this.lastNorthM = northM;
    this.lastEastM = eastM;
    this.lastHeightM = heightM;
  }

  private set(slot: number, northM: number, eastM: number, heightM: number): void {
    if (slot < 0 || slot >= MAX_SLOTS) return;
    this.known[slot] = 1;
    this.places[3 * slot] = eastM;
    this.places[3 * slot + 1] = heightM;
    this.places[3 * slot + 2] = -northM;
  }

  has(slot: number): boolean {
    return slot >= 0 && slot < MAX_SLOTS && this.known[slot] === 1;
  }

  clear(): void {
    this.known.fill(0);
    this.lastTick = Number.NaN;
  }

  /** Replaces everything by a whole track. */
  load(track: TrackSamples): void {
    this.clear();
    for (let i = 0; i < track.ticks.length; i++) {
      this.note(track.ticks[i], track.northM[i], track.eastM[i], track.heightAboveRunwayM[i]);
    }
    this.lastTick = Number.NaN;
  }
}

/** Latest slot that lies before a tick. */
export const slotBefore = (tick: number): number => Math.ceil(tick / TICKS_PER_SLOT) - 1;
