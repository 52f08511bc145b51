import { eigenvalues4Into } from '../numerics/eigen4.ts';
import type { AircraftClass, FlightCategory } from './criteria-tables.ts';
import { gridContour, type PointList } from './grid-contours.ts';
import { createCellJudge, type BilinearSystem, type StabilityMap } from './stability-map.ts';

export interface MapBoundaries {
  /** For Levels 1, 2 and 3: the lines on which the level ends. */
  lines: PointList[][];
  /** For Levels 1, 2 and 3: pieces that cover what does not reach the level. */
  beyond: PointList[][];
  /** Where the spiral neither converges nor diverges. */
  spiralNeutral: PointList[];
  /** Where the number of a level can stand: in the middle of each large region; 4 is below Level 3. */
  labels: { level: number; x: number; y: number }[];
}

/** Halvings of a grid edge: the crossing is known to 1/512 of a cell. */
const HALVINGS = 8;
/** A region deserves a number when this share of the map's height (or width) fits between its middle and its edge. */
const LABEL_ROOM = 0.045;

/**
 * Boundaries of the levels over a map, each crossing of a grid edge found on the model itself.
 *
 * The grid only says which edges are crossed; where, is found by halving with the same eigenvalues and criteria as the
 * cells, so lines are smooth where the limits are and jump where the modes do.
 *
 * @param system    The system of the map.
 * @param map       \`stabilityMap\` of the same system, class and category.
 * @param klass     Class.
 * @param category  Flight phase category.
 * @returns         Lines, pieces and places for numbers, in the units of the axes.
 * @throws {NumericsError} no-convergence of the eigenvalues.
 * @sign            none
 * @source          \`stabilityMap\`; the halving is ours.
 */
export function mapBoundaries(
  system: BilinearSystem,
  map: StabilityMap,
  klass: AircraftClass,
  category: FlightCategory,
): MapBoundaries {
  const judge = createCellJudge(klass, category);
  const one = {
    dutchZeta: new Float64Array(1),
    dutchOmega: new Float64Array(1),
    roll: new Float64Array(1),
    spiral: new Float64Array(1),
    growth: new Float64Array(1),
    level: new Uint8Array(1),
    pattern: new Uint8Array(1),
  };
  const a = new Float64Array(16);
  const roots = new Float64Array(8);
  const judgeAt = (x: number, y: number): typeof one => {
    for (let k = 0; k < 16; k++) a[k] = system.base[k] + x * system.alongX[k] + y * system.alongY[k];
    eigenvalues4Into(roots, a);
    judge(one, 0, a, roots);
    return one;
  };
  const halve =
    (inside: (cell: typeof one) => boolean) =>
    (from: readonly [number, number], to: readonly [number, number]): number => {
      const first = inside(judgeAt(from[0], from[1]));
      let [low, high] = [0, 1];
      for (let k = 0; k < HALVINGS; k++) {
        const t = 0.5 * (low + high);
        const same = inside(judgeAt(from[0] + t * (to[0] - from[0]), from[1] + t * (to[1] - from[1]))) === first;
        if (same) low = t;
        else high = t;
      }
      return 0.5 * (low + high);
    };
  const levels = [1, 2, 3].map((level) =>
    gridContour(
      map.xs,
      map.ys,
      (node) => map.level[node] > level,
      halve((cell) => cell.level[0] > level),
    ),
  );
  const spiral = gridContour(
    map.xs,
    map.ys,
    (node) => map.spiral[node] > 0,
    halve((cell) => cell.spiral[0] > 0),
  );
  return {
    lines: levels.map(({ lines }) => lines),
    beyond: levels.map(({ pieces }) => pieces),
    spiralNeutral: spiral.lines,
    labels: regionMiddles(map),
  };
}

/** The node furthest from the edge of each connected region of one level. */
function regionMiddles({ xs, ys, level }: StabilityMap): MapBoundaries['labels'] {
  const [columns, rows] = [xs.length, ys.length];
  const room = roomAround(level, columns, rows);
  const seen = new Uint8Array(columns * rows);
  const steps = [-1, 1, -columns, columns];
  const out: MapBoundaries['labels'] = [];
  for (let start = 0; start < seen.length; start++) {
    if (seen[start]) continue;
    const stack = [start];
    seen[start] = 1;
    let best = start;
    for (let node = stack.pop(); node !== undefined; node = stack.pop()) {
      if (room[node] > room[best]) best = node;
      const i = node % columns;
      for (let k = 0; k < 4; k++) {
        if ((k === 0 && i === 0) || (k === 1 && i + 1 === columns)) continue;
        const next = node + steps[k];
        if (next < 0 || next >= seen.length || seen[next] || level[next] !== level[node]) continue;
        seen[next] = 1;
        stack.push(next);
      }
    }
    if (room[best] >= LABEL_ROOM * Math.min(columns, rows)) {
      out.push({ level: level[best], x: xs[best % columns], y: ys[Math.floor(best / columns)] });
    }
  }
  return out;
}

/** Steps (a diagonal one counts as one) from each node to the nearest of another level, or to the frame. */
function roomAround(level: Uint8Array, columns: number, rows: number): Float64Array {
  const room = new Float64Array(columns * rows);
  const pass = (from: number, to: number, step: 1 | -1): void => {
    const before = [-step, -step * columns, -step * (columns + 1), -step * (columns - 1)];
    for (let node = from; node !== to; node += step) {
      const i = node % columns;
      let least = Infinity;
      for (let k = 0; k < 4 && least > 0; k++) {
        const by = before[k];
        const next = node + by;
        const outside = next < 0 || next >= room.length || Math.abs((next % columns) - i) > 1;
        least = Math.min(least, outside || level[next] !== level[node] ? 0 : room[next]);
      }
      const present = step === 1 ? Infinity : room[node];
      room[node] = Math.min(present, least + 1);
    }
  };
  pass(0, room.length, 1);
  pass(room.length - 1, -1, -1);
  return room;
}
