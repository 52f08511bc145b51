/** Nacelles, propeller discs and exhaust plates at the engines' own places. Drawing proportions are ours. */
import type { EngineShape, Panel, ShapeSource, Station } from './shape-types.ts';

interface Body {
  noseX: number;
  tailX: number;
  bodyRadius: number;
  fuselage: readonly Station[];
}
type EngineData = NonNullable<ShapeSource['engines']>[number];

/** Nacelle outlines: [fraction of the length, radius over the largest]. */
const PROPELLER_NACELLE: readonly (readonly [number, number])[] = [
  [0, 0.3],
  [0.05, 0.62],
  [0.15, 0.86],
  [0.3, 1],
  [0.48, 0.97],
  [0.68, 0.78],
  [0.86, 0.5],
  [1, 0.3],
];
const JET_NACELLE: readonly (readonly [number, number])[] = [
  [0, 0.84],
  [0.06, 0.95],
  [0.25, 1],
  [0.6, 0.94],
  [0.82, 0.78],
  [1, 0.6],
];

/** One shape per engine, in the order of the data. */
export function shapeEngines(source: ShapeSource, wing: Panel, body: Body): EngineShape[] {
  return source.engines.map((engine) =>
    engine.kind === 'propeller' ? propeller(engine, source, wing, body) : jet(engine, source, wing, body),
  );
}

/** Leading edge, chord and height of the wing at a distance y from the centre line. */
export function wingAt(wing: Panel, y: number): { x: number; z: number; chord: number } {
  const t = Math.min(1, Math.abs(y) / wing.tip.y);
  return {
    x: wing.root.x + (wing.tip.x - wing.root.x) * t,
    z: wing.root.z + (wing.tip.z - wing.root.z) * t,
    chord: wing.root.chord + (wing.tip.chord - wing.root.chord) * t,
  };
}

function loft(
  rows: readonly (readonly [number, number])[],
  front: number,
  back: number,
  radius: number,
  z: number,
): Station[] {
  return rows.map(([t, r]) => ({ x: front + (back - front) * t, halfWidth: r * radius, halfHeight: r * radius, z }));
}

const turnOf = (engine: EngineData): -1 | 1 => (engine.rotation === 'counter-clockwise' ? -1 : 1);

function propeller(engine: EngineData, source: ShapeSource, wing: Panel, body: Body): EngineShape {
  const span = source.geometry.wingSpan_m;
  if (engine.y_m === 0) {
    const first = body.fuselage[0];
    const x = body.noseX + 0.02 * span;
    return {
      kind: 'propeller',
      x,
      y: 0,
      z: first.z,
      discRadius: 0.088 * span,
      nacelle: [],
      strut: null,
      turn: turnOf(engine),
    };
  }
  const at = wingAt(wing, engine.y_m);
  const z = at.z - 0.012 * span;
  const front = at.x + 0.62 * at.chord;
  const back = at.x - 1.12 * at.chord;
  const neighbour = nearestNeighbour(engine, source);
  const clearance = Math.min(Math.abs(engine.y_m) - 0.86 * body.bodyRadius, neighbour / 2 - 0.02 * span);
  const discRadius = Math.max(0.04 * span, Math.min(0.1 * span, clearance));
  return {
    kind: 'propeller',
    x: front + 0.012 * span,
    y: engine.y_m,
    z,
    discRadius,
    nacelle: loft(PROPELLER_NACELLE, front, back, 0.027 * span, z),
    strut: null,
    turn: turnOf(engine),
  };
}

/** Spacing to the next engine on the same side; Infinity without one. */
function nearestNeighbour(engine: EngineData, source: ShapeSource): number {
  let best = Number.POSITIVE_INFINITY;
  for (const other of source.engines) {
    if (other === engine || other.kind !== 'propeller' || other.y_m * engine.y_m <= 0) continue;
    best = Math.min(best, Math.abs(other.y_m - engine.y_m));
  }
  return best;
}

function jet(engine: EngineData, source: ShapeSource, wing: Panel, body: Body): EngineShape {
  const span = source.geometry.wingSpan_m;
  // fan size from thrust: 0.0026 m per √N (ours, plausible for turbofans)
  const radius = Math.min(0.06 * span, Math.max(0.018 * span, 0.0026 * Math.sqrt(engine.staticThrust_N)));
  const y = engine.y_m;
  const distance = Math.abs(y);
  if (distance < 0.4 * body.bodyRadius) {
    const last = body.fuselage[body.fuselage.length - 1];
    return {
      kind: 'jet',
      x: body.tailX,
      y,
      z: last.z,
      discRadius: Math.max(radius, last.halfWidth),
      nacelle: [],
      strut: null,
      turn: 1,
    };
  }
  if (distance < body.bodyRadius + 2.4 * radius) {
    // beside the rear fuselage
    const front = body.tailX + 0.34 * (body.noseX - body.tailX);
    const back = front - 5.2 * radius;
    const z = -0.45 * body.bodyRadius;
    const side = Math.sign(y);
    const strut = {
      front: front - radius,
      back: back + 1.4 * radius,
      yFrom: side * 0.6 * body.bodyRadius,
      yTo: y - side * 0.8 * radius,
      top: z - 0.1 * radius,
      bottom: z + 0.1 * radius,
    };
    return {
      kind: 'jet',
      x: back,
      y,
      z,
      discRadius: radius,
      nacelle: loft(JET_NACELLE, front, back, radius, z),
      strut,
      turn: 1,
    };
  }
  const at = wingAt(wing, y);
  const front = at.x + 2.5 * radius;
  const back = at.x - 1.3 * radius;
  const z = at.z + 1.25 * radius;
  const strut = {
    front: at.x + 1.1 * radius,
    back: at.x - 0.5 * at.chord,
    yFrom: y - 0.11 * radius,
    yTo: y + 0.11 * radius,
    top: at.z - 0.01 * span,
    bottom: z - 0.8 * radius,
  };
  return {
    kind: 'jet',
    x: back,
    y,
    z,
    discRadius: radius,
    nacelle: loft(JET_NACELLE, front, back, radius, z),
    strut,
    turn: 1,
  };
}
