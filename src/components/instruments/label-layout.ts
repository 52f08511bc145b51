/** Keeps labels on one edge apart. */

/** Moves positions apart to at least `gap`, keeping order and staying inside [low, high]; returns new positions in input order. */
export function spread(positions: readonly number[], gap: number, low: number, high: number): number[] {
  const order = positions.map((_, index) => index).sort((a, b) => positions[a] - positions[b]);
  const out = positions.slice();
  let floor = low;
  for (const index of order) {
    out[index] = Math.max(out[index], floor);
    floor = out[index] + gap;
  }
  let ceiling = high;
  for (const index of order.reverse()) {
    out[index] = Math.min(out[index], ceiling);
    ceiling = out[index] - gap;
  }
  return out;
}

export interface EdgeMark {
  x: number;
  /** Width of its text, px. */
  width: number;
}
export interface EdgeLabel {
  side: 'left' | 'right' | 'none';
}

/**
 * On which side of its mark each label of the heading edge goes: outer marks outward, inner ones into the gap when
 * there is room, else none (the mark itself stays).
 */
export function edgeLabels(marks: readonly EdgeMark[], pad: number, low: number, high: number): EdgeLabel[] {
  const order = marks.map((_, index) => index).sort((a, b) => marks[a].x - marks[b].x || a - b);
  const out: EdgeLabel[] = marks.map(() => ({ side: 'none' }));
  const taken: [number, number][] = [];
  const free = (from: number, to: number): boolean =>
    from >= low && to <= high && taken.every(([a, b]) => to <= a || from >= b);
  const tryPlace = (index: number, sides: readonly ('left' | 'right')[]): void => {
    const { x, width } = marks[index];
    for (const side of sides) {
      const from = side === 'left' ? x - pad - width : x + pad;
      if (marks.some((m, i) => i !== index && m.x > from - pad && m.x < from + width + pad)) continue;
      if (!free(from, from + width)) continue;
      out[index] = { side };
      taken.push([from, from + width]);
      return;
    }
  };
  order.forEach((index, rank) => tryPlace(index, rank === 0 ? ['left', 'right'] : ['right', 'left']));
  return out;
}
