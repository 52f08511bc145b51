/** Points with x and y alternating. */
export type PointList = Float64Array;

export interface GridContour {
  /** Polylines between inside and outside; a closed one ends where it began. */
  lines: PointList[];
  /** Closed pieces that together cover the inside; they touch and do not overlap. */
  pieces: PointList[];
}

type Point = readonly [number, number];

/**
 * Outline and cover of the inside of a region that is known at the nodes of a grid, by marching squares.
 *
 * Where an edge of the grid is crossed, the caller finds the crossing; so a jump is met as exactly as a smooth change. A
 * square with its inside corners across from each other counts as joined.
 *
 * @param xs        Abscissae of the columns.
 * @param ys        Ordinates of the rows.
 * @param inside    Whether a node (row · columns + column) is inside.
 * @param crossing  Share of the way from the first point to the second at which the inside ends; 0 … 1.
 * @returns         Polylines and pieces in the units of the axes.
 * @throws          Nothing.
 * @sign            none
 * @source          W. Lorensen, H. Cline, SIGGRAPH 1987, in two dimensions.
 */
export function gridContour(
  xs: ArrayLike<number>,
  ys: ArrayLike<number>,
  inside: (node: number) => boolean,
  crossing: (from: Point, to: Point) => number,
): GridContour {
  const columns = xs.length;
  const is = new Uint8Array(columns * ys.length);
  for (let node = 0; node < is.length; node++) is[node] = inside(node) ? 1 : 0;
  const links = new Map<number, number[]>();
  const place = new Map<number, Point>();
  /** Edges are numbered by their lower left node: 2n runs right, 2n + 1 runs up. */
  const cross = (node: number, up: boolean): number => {
    const key = 2 * node + (up ? 1 : 0);
    if (!place.has(key)) {
      const i = node % columns;
      const j = (node - i) / columns;
      const from: Point = [xs[i], ys[j]];
      const to: Point = up ? [xs[i], ys[j + 1]] : [xs[i + 1], ys[j]];
      const t = crossing(from, to);
      place.set(key, [from[0] + t * (to[0] - from[0]), from[1] + t * (to[1] - from[1])]);
    }
    return key;
  };
  const join = (a: number, b: number): void => {
    for (const [from, to] of [
      [a, b],
      [b, a],
    ]) {
      const known = links.get(from);
      if (known) known.push(to);
      else links.set(from, [to]);
    }
  };
  const pieces: PointList[] = [];
  for (let j = 0; j + 1 < ys.length; j++) {
    let fullFrom = -1;
    const closeRun = (end: number): void => {
      if (fullFrom < 0) return;
      pieces.push(Float64Array.of(xs[fullFrom], ys[j], xs[end], ys[j], xs[end], ys[j + 1], xs[fullFrom], ys[j + 1]));
      fullFrom = -1;
    };
    for (let i = 0; i + 1 < columns; i++) {
      const node = j * columns + i;
      const count = is[node] + is[node + 1] + is[node + columns + 1] + is[node + columns];
      if (count === 4) {
        if (fullFrom < 0) fullFrom = i;
        continue;
      }
      if (fullFrom >= 0) closeRun(i);
      if (count === 0) continue;
      const corners = [is[node], is[node + 1], is[node + columns + 1], is[node + columns]].map((one) => one === 1);
      // South, east, north, west: the edge between a corner and the next one round the square.
      const edge = [
        () => cross(node, false),
        () => cross(node + 1, true),
        () => cross(node + columns, false),
        () => cross(node, true),
      ];
      const piece: number[] = [];
      const crossed: { key: number; leaves: boolean }[] = [];
      for (let k = 0; k < 4; k++) {
        if (corners[k]) piece.push(xs[i + (k === 1 || k === 2 ? 1 : 0)], ys[j + (k >= 2 ? 1 : 0)]);
        if (corners[k] !== corners[(k + 1) % 4]) {
          const key = edge[k]();
          const at = place.get(key);
          if (at) piece.push(...at);
          crossed.push({ key, leaves: corners[k] });
        }
      }
      pieces.push(Float64Array.from(piece));
      // Each way out of the inside is joined to the next way in: outside corners are cut off.
      crossed.forEach(({ key, leaves }, k) => {
        if (leaves) join(key, crossed[(k + 1) % crossed.length].key);
      });
    }
    closeRun(columns - 1);
  }
  return { lines: polylines(links, place), pieces };
}

function polylines(links: Map<number, number[]>, place: Map<number, Point>): PointList[] {
  const lines: PointList[] = [];
  const used = new Set<number>();
  const walk = (start: number): void => {
    const line: number[] = [];
    let here: number | undefined = start;
    while (here !== undefined && !used.has(here)) {
      used.add(here);
      line.push(...(place.get(here) ?? []));
      here = links.get(here)?.find((next) => !used.has(next));
    }
    if (links.get(start)?.length === 2 && line.length > 4) line.push(line[0], line[1]);
    if (line.length > 2) lines.push(Float64Array.from(line));
  };
  for (const [key, next] of links) if (next.length === 1 && !used.has(key)) walk(key);
  for (const key of links.keys()) if (!used.has(key)) walk(key);
  return lines;
}
