/** The instant last shown, so that a repeated call draws nothing and a turned view can be drawn again. */
import type { Observation } from '#shared/model/plant-types.ts';

const KEYS = [
  'tick',
  'timeS',
  'northM',
  'eastM',
  'heightAboveRunwayM',
  'phiRad',
  'psiRad',
  'thetaRad',
  'betaRad',
] as const;

export class Rememberer {
  now: Observation | null = null;
  ghost: Observation | null = null;
  private readonly shown = new Float64Array(2 * KEYS.length).fill(Number.NaN);

  /** Keeps the instant; false when the same instant is on the screen already. Allocates nothing. */
  take(now: Observation, ghost: Observation | null): boolean {
    let same = now === this.now && ghost === this.ghost;
    for (let i = 0; i < KEYS.length; i++) {
      const mine = now[KEYS[i]];
      const other = ghost === null ? 0 : ghost[KEYS[i]];
      if (this.shown[i] !== mine || this.shown[KEYS.length + i] !== other) same = false;
      this.shown[i] = mine;
      this.shown[KEYS.length + i] = other;
    }
    this.now = now;
    this.ghost = ghost;
    return !same;
  }

  /** Makes the next call draw, whatever it brings. */
  forget(): void {
    this.shown.fill(Number.NaN);
  }
}
