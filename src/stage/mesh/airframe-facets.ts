/** Facets of fuselage, nacelles, wings, tail and fin from the shape; moving surfaces come apart, about their hinges. */
import type { AirframeShape, EngineShape, MovingEdge, Panel, Station } from '../shape/shape-types.ts';
import { FacetBuilder, type FacetMesh, type FacetPaint } from './facet-mesh.ts';

type Point = [number, number, number];

const BODY_SIDES = 18;
const NACELLE_SIDES = 12;
/** Thickest point of a surface section, and its lower half over its upper half. */
const CREST = 0.28;
const LOWER_SHARE = 0.7;

/** Everything that does not move. */
export function fixedFacets(shape: AirframeShape): FacetMesh {
  const builder = new FacetBuilder();
  addBody(builder, shape.fuselage, 0, BODY_SIDES, (mid, angle) =>
    inWindscreen(shape, mid) && Math.abs(angle) < 0.95 ? 'ink' : 'toned',
  );
  for (const engine of shape.engines) {
    if (engine.nacelle.length > 0) addBody(builder, engine.nacelle, engine.y, NACELLE_SIDES, () => 'toned');
    if (engine.strut !== null) addStrut(builder, engine.strut);
  }
  for (const side of [-1, 1] as const) {
    addPanel(builder, shape.wing, side, shape.aileron);
    addPanel(builder, shape.tailplane, side, null);
  }
  addFin(builder, shape.fin, shape.rudder);
  return builder.mesh;
}

const inWindscreen = (shape: AirframeShape, x: number): boolean => {
  const t = (shape.noseX - x) / shape.lengthM;
  return t > shape.windscreen.from && t < shape.windscreen.to;
};

/** A hinged surface: facets with the origin on the hinge line, the line, and its axis. */
export interface HingedFacets {
  mesh: FacetMesh;
  origin: Point;
  /** Unit vector along the hinge; a positive turn about it moves the trailing edge as `positive` says. */
  axis: Point;
}

/** Aileron of one side; a positive turn lowers its trailing edge. */
export function aileronFacets(shape: AirframeShape, side: -1 | 1): HingedFacets {
  const builder = new FacetBuilder();
  const { wing, aileron } = shape;
  const inner = hingePoint(wing, aileron.from, aileron.hinge, side);
  const outer = hingePoint(wing, aileron.to, aileron.hinge, side);
  addFlap(builder, wing, aileron, side, inner);
  const axis = unit([outer[0] - inner[0], outer[1] - inner[1], outer[2] - inner[2]]);
  // about +y (right), x forward turns up into −z, so the trailing edge goes down into +z
  return { mesh: builder.mesh, origin: inner, axis: side > 0 ? axis : [-axis[0], -axis[1], -axis[2]] };
}

/** Rudder; a positive turn moves its trailing edge to the left, as delta_r > 0 does. */
export function rudderFacets(shape: AirframeShape): HingedFacets {
  const builder = new FacetBuilder();
  const { fin, rudder } = shape;
  const low = finPoint(fin, 0, rudder.hinge, 0);
  const high = finPoint(fin, 1, rudder.hinge, 0);
  const at = (t: number, c: number, side: -1 | 0 | 1): Point => relative(finPoint(fin, t, c, side), low);
  for (const side of [-1, 1] as const) {
    builder.facet([at(0, rudder.hinge, side), at(0, 1, 0), at(1, 1, 0), at(1, rudder.hinge, side)], [0, side, 0]);
  }
  builder.facet(
    [at(0, rudder.hinge, -1), at(0, rudder.hinge, 1), at(1, rudder.hinge, 1), at(1, rudder.hinge, -1)],
    [1, 0, 0],
  );
  builder.facet([at(1, rudder.hinge, -1), at(1, rudder.hinge, 1), at(1, 1, 0)], [0, 0, -1]);
  builder.facet([at(0, rudder.hinge, -1), at(0, rudder.hinge, 1), at(0, 1, 0)], [0, 0, 1]);
  // about −z (up) seen from above the turn is counter-clockwise: the part behind the hinge swings to the right; +z swings it left
  return { mesh: builder.mesh, origin: low, axis: unit([low[0] - high[0], 0, low[2] - high[2]]) };
}

function addBody(
  builder: FacetBuilder,
  stations: readonly Station[],
  y: number,
  sides: number,
  paint: (x: number, angle: number) => FacetPaint,
): void {
  const ring = (station: Station, k: number): Point => {
    const angle = (k / sides) * 2 * Math.PI;
    return [station.x, y + station.halfWidth * Math.sin(angle), station.z - station.halfHeight * Math.cos(angle)];
  };
  for (let i = 0; i + 1 < stations.length; i++) {
    const front = stations[i];
    const back = stations[i + 1];
    for (let k = 0; k < sides; k++) {
      let angle = ((k + 0.5) / sides) * 2 * Math.PI;
      if (angle > Math.PI) angle -= 2 * Math.PI;
      builder.facet(
        [ring(front, k), ring(back, k), ring(back, k + 1), ring(front, k + 1)],
        [0, Math.sin(angle), -Math.cos(angle)],
        paint((front.x + back.x) / 2, angle),
      );
    }
  }
  const first = stations[0];
  const last = stations[stations.length - 1];
  builder.facet(
    Array.from({ length: sides }, (_, k) => ring(first, k)),
    [1, 0, 0],
  );
  builder.facet(
    Array.from({ length: sides }, (_, k) => ring(last, k)),
    [-1, 0, 0],
  );
}

function addStrut(builder: FacetBuilder, strut: NonNullable<EngineShape['strut']>): void {
  const { front, back, yFrom, yTo, top, bottom } = strut;
  const slant = 0.35 * (front - back);
  const corner = (high: boolean, ahead: boolean, far: boolean): Point => [
    (ahead ? front : back) - (high ? slant : 0),
    far ? yTo : yFrom,
    high ? top : bottom,
  ];
  const sideways = Math.sign(yTo - yFrom);
  for (const far of [false, true]) {
    const outward: Point = [0, far ? sideways : -sideways, 0];
    builder.facet(
      [corner(false, false, far), corner(false, true, far), corner(true, true, far), corner(true, false, far)],
      outward,
    );
  }
  for (const ahead of [false, true]) {
    const outward: Point = [ahead ? 1 : -1, 0, 0];
    builder.facet(
      [corner(false, ahead, false), corner(false, ahead, true), corner(true, ahead, true), corner(true, ahead, false)],
      outward,
    );
  }
  builder.facet(
    [corner(true, true, false), corner(true, true, true), corner(true, false, true), corner(true, false, false)],
    [0, 0, -1],
  );
  builder.facet(
    [corner(false, true, false), corner(false, true, true), corner(false, false, true), corner(false, false, false)],
    [0, 0, 1],
  );
}

/** Half thickness of a section at a chord fraction, over the chord. */
const halfThickness = (panel: Panel, c: number): number =>
  (panel.thickness / 2) * (c < CREST ? c / CREST : (1 - c) / (1 - CREST));

function wingPoint(panel: Panel, t: number, c: number, side: -1 | 1, surface: -1 | 0 | 1): Point {
  const chord = panel.root.chord + (panel.tip.chord - panel.root.chord) * t;
  const rise = surface === 0 ? 0 : halfThickness(panel, c) * chord * (surface > 0 ? 1 : LOWER_SHARE);
  return [
    panel.root.x + (panel.tip.x - panel.root.x) * t - c * chord,
    side * (panel.root.y + (panel.tip.y - panel.root.y) * t),
    panel.root.z + (panel.tip.z - panel.root.z) * t - (surface < 0 ? -rise : rise),
  ];
}

const hingePoint = (panel: Panel, t: number, c: number, side: -1 | 1): Point => wingPoint(panel, t, c, side, 0);

/** One half of a wing or tailplane; where an aileron sits, the section ends at its hinge. */
function addPanel(builder: FacetBuilder, panel: Panel, side: -1 | 1, moving: MovingEdge | null): void {
  const stops = moving === null ? [0, 1] : [0, moving.from, moving.to, 1];
  const hinge = moving?.hinge ?? 0.74;
  const at = (t: number, c: number, surface: -1 | 0 | 1): Point => wingPoint(panel, t, c, side, surface);
  for (let i = 0; i + 1 < stops.length; i++) {
    const [a, b] = [stops[i], stops[i + 1]];
    const open = moving !== null && i === 1;
    for (const surface of [-1, 1] as const) {
      const outward: Point = [0, 0, -surface];
      builder.facet([at(a, 0, 0), at(b, 0, 0), at(b, CREST, surface), at(a, CREST, surface)], outward);
      builder.facet(
        [at(a, CREST, surface), at(b, CREST, surface), at(b, hinge, surface), at(a, hinge, surface)],
        outward,
      );
      if (!open) builder.facet([at(a, hinge, surface), at(b, hinge, surface), at(b, 1, 0), at(a, 1, 0)], outward);
    }
    if (open) {
      builder.facet([at(a, hinge, 1), at(b, hinge, 1), at(b, hinge, -1), at(a, hinge, -1)], [-1, 0, 0]);
      builder.facet([at(a, hinge, 1), at(a, 1, 0), at(a, hinge, -1)], [0, side, 0]);
      builder.facet([at(b, hinge, 1), at(b, 1, 0), at(b, hinge, -1)], [0, -side, 0]);
    }
  }
  builder.facet(
    [at(1, 0, 0), at(1, CREST, 1), at(1, hinge, 1), at(1, 1, 0), at(1, hinge, -1), at(1, CREST, -1)],
    [0, side, 0],
  );
}

function addFlap(builder: FacetBuilder, panel: Panel, edge: MovingEdge, side: -1 | 1, origin: Point): void {
  const at = (t: number, c: number, surface: -1 | 0 | 1): Point =>
    relative(wingPoint(panel, t, c, side, surface), origin);
  const { from, to, hinge } = edge;
  for (const surface of [-1, 1] as const) {
    builder.facet([at(from, hinge, surface), at(to, hinge, surface), at(to, 1, 0), at(from, 1, 0)], [0, 0, -surface]);
  }
  builder.facet([at(from, hinge, 1), at(to, hinge, 1), at(to, hinge, -1), at(from, hinge, -1)], [1, 0, 0]);
  builder.facet([at(from, hinge, 1), at(from, 1, 0), at(from, hinge, -1)], [0, -side, 0]);
  builder.facet([at(to, hinge, 1), at(to, 1, 0), at(to, hinge, -1)], [0, side, 0]);
}

function finPoint(fin: Panel, t: number, c: number, side: -1 | 0 | 1): Point {
  const chord = fin.root.chord + (fin.tip.chord - fin.root.chord) * t;
  return [
    fin.root.x + (fin.tip.x - fin.root.x) * t - c * chord,
    side * halfThickness(fin, c) * chord,
    fin.root.z + (fin.tip.z - fin.root.z) * t,
  ];
}

function addFin(builder: FacetBuilder, fin: Panel, rudder: MovingEdge): void {
  const at = (t: number, c: number, side: -1 | 0 | 1): Point => finPoint(fin, t, c, side);
  const h = rudder.hinge;
  for (const side of [-1, 1] as const) {
    builder.facet([at(0, 0, 0), at(1, 0, 0), at(1, CREST, side), at(0, CREST, side)], [0, side, 0]);
    builder.facet([at(0, CREST, side), at(1, CREST, side), at(1, h, side), at(0, h, side)], [0, side, 0]);
  }
  builder.facet([at(0, h, -1), at(0, h, 1), at(1, h, 1), at(1, h, -1)], [-1, 0, 0]);
  builder.facet([at(1, 0, 0), at(1, CREST, 1), at(1, h, 1), at(1, h, -1), at(1, CREST, -1)], [0, 0, -1]);
}

const relative = (point: Point, origin: Point): Point => [
  point[0] - origin[0],
  point[1] - origin[1],
  point[2] - origin[2],
];

function unit(v: Point): Point {
  const length = Math.hypot(v[0], v[1], v[2]);
  return [v[0] / length, v[1] / length, v[2] / length];
}
