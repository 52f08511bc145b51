/** Contour lines of a sampled field by marching squares, joined into polylines. */

export interface ContourGrid {
  columns: number;
  rows: number;
  xRange: readonly [number, number];
  yRange: readonly [number, number];
}
export type ContourLine = readonly (readonly [number, number])[];

/**
 * Polylines where the field passes `value`. Samples sit at cell centres; row-major from the lowest y.
 * Non-finite samples leave a gap.
 */
export function contourPaths(field: ArrayLike<number>, grid: ContourGrid, value: number): ContourLine[] {
  const { columns, rows } = grid;
  const dx = (grid.xRange[1] - grid.xRange[0]) / columns;
  const dy = (grid.yRange[1] - grid.yRange[0]) / rows;
  const sample = (i: number, j: number): number => field[j * columns + i] ?? NaN;
  // One vertex per crossed grid edge; neighbours share it, so segments can be joined by edge number.
  const links = new Map<number, number[]>();
  const place = new Map<number, readonly [number, number]>();
  const edgePoint = (i: number, j: number, vertical: boolean): number => {
    const key = (j * columns + i) * 2 + (vertical ? 1 : 0);
    if (!place.has(key)) {
      const a = sample(i, j);
      const b = vertical ? sample(i, j + 1) : sample(i + 1, j);
      const part = (value - a) / (b - a);
      place.set(key, [
        grid.xRange[0] + (i + 0.5 + (vertical ? 0 : part)) * dx,
        grid.yRange[0] + (j + 0.5 + (vertical ? part : 0)) * dy,
      ]);
    }
    return key;
  };
  const join = (a: number, b: number): void => {
    (links.get(a) ?? links.set(a, []).get(a))?.push(b);
    (links.get(b) ?? links.set(b, []).get(b))?.push(a);
  };
  for (let j = 0; j + 1 < rows; j++) {
    for (let i = 0; i + 1 < columns; i++) {
      const corners = [sample(i, j), sample(i + 1, j), sample(i + 1, j + 1), sample(i, j + 1)];
      if (!corners.every(Number.isFinite)) continue;
      const code = corners.reduce((sum, c, k) => sum + (c > value ? 1 << k : 0), 0);
      if (code === 0 || code === 15) continue;
      const south = (): number => edgePoint(i, j, false);
      const north = (): number => edgePoint(i, j + 1, false);
      const west = (): number => edgePoint(i, j, true);
      const east = (): number => edgePoint(i + 1, j, true);
      switch (code) {
        case 1:
        case 14:
          join(west(), south());
          break;
        case 2:
        case 13:
          join(south(), east());
          break;
        case 4:
        case 11:
          join(east(), north());
          break;
        case 8:
        case 7:
          join(north(), west());
          break;
        case 3:
        case 12:
          join(west(), east());
          break;
        case 6:
        case 9:
          join(south(), north());
          break;
        case 5:
          join(west(), south());
          join(east(), north());
          break;
        default:
          join(south(), east());
          join(north(), west());
      }
    }
  }
  return tracePolylines(links, place);
}

function tracePolylines(links: Map<number, number[]>, place: Map<number, readonly [number, number]>): ContourLine[] {
  const lines: ContourLine[] = [];
  const used = new Set<number>();
  const walk = (start: number): void => {
    const line: (readonly [number, number])[] = [];
    let here: number | undefined = start;
    while (here !== undefined && !used.has(here)) {
      used.add(here);
      const point = place.get(here);
      if (point) line.push(point);
      here = links.get(here)?.find((next) => !used.has(next));
    }
    const closes = links.get(start)?.length === 2 && line.length > 2;
    const first = line[0];
    if (closes && first && here === undefined) line.push(first);
    if (line.length > 1) lines.push(line);
  };
  for (const [key, next] of links) if (next.length === 1 && !used.has(key)) walk(key);
  for (const key of links.keys()) if (!used.has(key)) walk(key);
  return lines;
}
