/** Ticks and phases of the scrubber. */
export interface ScrubberPhase {
  id: string;
  text: string;
  fromS: number;
  toS: number;
  kind: 'plain' | 'dead' | 'shade';
}

export interface ScrubberTick {
  timeS: number;
  text: string;
  size: 'minor' | 'major' | 'long';
}

/** Ticks against a zero: minor ones every half label step or so, labels where there is room. */
export function scrubberTicks(durationS: number, zeroS: number, width: number): ScrubberTick[] {
  const perSecond = width / Math.max(1, durationS);
  const minor = [0.5, 1, 2, 5, 10, 30].find((step) => step * perSecond >= 12) ?? 60;
  const label = [1, 3, 5, 10, 15, 30, 60].find((step) => step * perSecond >= 56 && step >= minor) ?? 120;
  const ticks: ScrubberTick[] = [];
  const first = Math.ceil(-zeroS / minor - 1e-9);
  const last = Math.floor((durationS - zeroS) / minor + 1e-9);
  for (let k = first; k <= last; k += 1) {
    const offset = k * minor;
    const labelled = Math.abs(offset / label - Math.round(offset / label)) < 1e-6;
    const rounded = Math.round(offset);
    ticks.push({
      timeS: zeroS + offset,
      size: labelled ? 'long' : Math.abs(offset - rounded) < 1e-6 ? 'major' : 'minor',
      text: labelled ? (rounded === 0 ? '0' : `${rounded < 0 ? '−' : '+'}${Math.abs(rounded)}`) : '',
    });
  }
  return ticks;
}

/** Words of a position for a screen reader. */
export function positionWords(timeS: number, zeroS: number, hasEvent: boolean): string {
  const offset = timeS - zeroS;
  if (!hasEvent) return `${timeS.toFixed(1)} seconds from the start`;
  return `${Math.abs(offset).toFixed(1)} seconds ${offset < 0 ? 'before' : 'after'} the event`;
}
