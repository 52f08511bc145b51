/** Rudder ratio schedule as drawn and edited: share of travel k over equivalent airspeed. */

export interface RatioData {
  law: 'inverse' | 'inverse-square' | 'table';
  mode?: 'ratio' | 'limit' | undefined;
  fullUpTo_kt?: number | undefined;
  table?: readonly (readonly [number, number])[] | undefined;
}

/** k at an equivalent airspeed (kt): 1 at most, held beyond the ends of a table. */
export function ratioAt(data: RatioData, easKt: number): number {
  if (data.law === 'table') {
    const table = data.table ?? [];
    const first = table[0];
    const last = table.at(-1);
    if (!first || !last) return 1;
    if (easKt <= first[0]) return first[1];
    if (easKt >= last[0]) return last[1];
    const i = table.findIndex(([kt]) => kt >= easKt);
    const [a, ka] = table[i - 1] ?? first;
    const [b, kb] = table[i] ?? last;
    return ka + ((kb - ka) * (easKt - a)) / (b - a);
  }
  const full = data.fullUpTo_kt ?? Infinity;
  if (easKt <= full) return 1;
  const share = full / easKt;
  return data.law === 'inverse' ? share : share * share;
}

/** The same schedule as a table of points, so that a law can be taken over and shaped by hand. */
export function asTable(data: RatioData, points: readonly number[]): [number, number][] {
  return points.map((kt) => [kt, Number(ratioAt(data, kt).toFixed(4))]);
}

/** A table with one point moved; speeds stay in order and shares within 0.01 … 1. */
export function movePoint(
  table: readonly (readonly [number, number])[],
  index: number,
  kt: number,
  share: number,
): [number, number][] {
  const low = (table[index - 1]?.[0] ?? 0) + 1;
  const high = (table[index + 1]?.[0] ?? Infinity) - 1;
  return table.map((point, i) =>
    i === index
      ? [Math.round(Math.min(high, Math.max(low, kt))), Number(Math.min(1, Math.max(0.01, share)).toFixed(3))]
      : [point[0], point[1]],
  );
}
