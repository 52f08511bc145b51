/**
 * What a plate shows, as a list of SVG shapes from back to front: sky and ground, grid, runway, horizon with its heading
 * ticks, track curtain, aeroplane with its engine discs, nose and flight path.
 */
import { buildAeroplane, type AeroplaneShape, type EngineDisc, type SolidPart } from './aeroplane-solid.ts';
import {
  add,
  type Attitude,
  createView,
  DEG,
  dot,
  type Point,
  polygonNormal,
  rotation,
  scale,
  sub,
  unit,
  type Vec,
  type View,
} from './projection.ts';

export interface PlateShape {
  d: string;
  fill?: string;
  stroke?: string;
  width?: number;
  dash?: string;
  opacity?: number;
}

export interface PlateLabel {
  text: string;
  x: number;
  y: number;
  anchor: 'start' | 'end';
}

export interface PlateSpec {
  width: number;
  height: number;
  shape: AeroplaneShape;
  /** Engines that give no thrust, by index. */
  failed: readonly number[];
  attitude: Attitude;
  /** Where the aeroplane goes through the air, right and above of the nose; deg. */
  pathRightDeg: number;
  pathUpDeg: number;
  /** From where it is seen: angle right of dead astern, angle above, distance in spans. */
  sightDeg: number;
  aboveDeg: number;
  distanceSpans: number;
  focal: number;
  heightM: number;
  /** Where the aeroplane stands in the picture; shares of width and height. */
  place: readonly [number, number];
  runway?: { offsetM: number; widthM: number };
}

export interface Plate {
  shapes: PlateShape[];
  labels: PlateLabel[];
  ring: Point | null;
}

const TONES = ['var(--tone-4)', 'var(--tone-3)', 'var(--tone-2)', 'var(--tone-1)', 'var(--tone-0)'];
const GRID_STEPS = 26;
/** Stripes of the track curtain: how many, and how long in spans. */
const STRIPES = 12;
const STRIPE_SPANS = 0.16;
/** Toward the light: ahead, left, above. */
const LIGHT: Vec = unit([0.8, -0.5, 0.75]);

const path = (points: readonly Point[], close: boolean): string =>
  points.length < 2
    ? ''
    : `M${points.map(([x, y]) => `${Math.round(x * 10) / 10},${Math.round(y * 10) / 10}`).join('L')}${close ? 'Z' : ''}`;

export function drawPlate(spec: PlateSpec): Plate {
  const origin: Vec = [0, 0, spec.heightM];
  const distance = spec.distanceSpans * spec.shape.spanM;
  const sight = spec.sightDeg * DEG;
  const above = spec.aboveDeg * DEG;
  const from = add(origin, [
    -distance * Math.cos(above) * Math.cos(sight),
    distance * Math.cos(above) * Math.sin(sight),
    distance * Math.sin(above),
  ]);
  const centre: Point = [spec.width * spec.place[0], spec.height * spec.place[1]];
  const view = createView({ from, headingDeg: -spec.sightDeg, downDeg: spec.aboveDeg, focal: spec.focal, centre });
  const turn = rotation(spec.attitude);
  const place = (v: Vec): Vec => add(origin, turn(v));
  const shapes: PlateShape[] = [...ground(view, spec), ...curtain(view, spec)];
  const foot = view.segment(origin, [0, 0, 0]);
  if (foot) shapes.push({ d: path(foot, false), stroke: 'var(--ink)', width: 1, dash: '1.5 3.5' });
  shapes.push(...aeroplane(view, spec, place));
  return { shapes, ...directions(view, spec, place, shapes) };
}

function ground(view: View, spec: PlateSpec): PlateShape[] {
  const { width, height } = spec;
  const y = view.horizonY;
  const shapes: PlateShape[] = [
    { d: `M0 0H${width}V${height}H0Z`, fill: 'var(--stage-sky)' },
    { d: `M0 ${y}H${width}V${height}H0Z`, fill: 'var(--stage-ground)' },
  ];
  [2, 3, 6, 10, 16, 24, 34].forEach((below, i) => {
    shapes.push({
      d: `M0 ${y + below}H${width}`,
      stroke: 'var(--stage-grid)',
      width: 0.9 - i * 0.1,
      opacity: 0.8 - i * 0.1,
    });
  });
  let grid = '';
  const step = spec.heightM;
  const reach = step * GRID_STEPS;
  const [baseX, baseY] = [Math.round(view.from[0] / step) * step, Math.round(view.from[1] / step) * step];
  for (let k = -GRID_STEPS; k <= GRID_STEPS; k += 1) {
    const across = view.segment([baseX + k * step, baseY - reach, 0], [baseX + k * step, baseY + reach, 0]);
    const along = view.segment([baseX - step, baseY + k * step, 0], [baseX + reach, baseY + k * step, 0]);
    for (const line of [across, along]) if (line) grid += path(line, false);
  }
  shapes.push({ d: grid, stroke: 'var(--stage-grid)', width: 0.8 });
  if (spec.runway) shapes.push(...runway(view, spec.runway));
  shapes.push({ d: `M0 ${y}H${width}`, stroke: 'var(--ink)', width: 1.5 });
  let [long, short] = ['', ''];
  for (let heading = -90; heading <= 90; heading += 5) {
    const at = view.point(add(view.from, [Math.cos(heading * DEG) * 1e5, Math.sin(heading * DEG) * 1e5, 0]));
    if (!at || at[0] < 0 || at[0] > width) continue;
    if (heading % 10 === 0) long += `M${Math.round(at[0] * 10) / 10} ${y}v-8`;
    else short += `M${Math.round(at[0] * 10) / 10} ${y}v-4`;
  }
  shapes.push({ d: long + short, stroke: 'var(--ink)', width: 1 });
  return shapes;
}

function runway(view: View, { offsetM, widthM }: { offsetM: number; widthM: number }): PlateShape[] {
  const [left, right] = [offsetM - widthM / 2, offsetM + widthM / 2];
  const area = (x0: number, x1: number, y0: number, y1: number): string =>
    path(
      view.polygon([
        [x0, y0, 0],
        [x1, y0, 0],
        [x1, y1, 0],
        [x0, y1, 0],
      ]),
      true,
    );
  let paint = '';
  for (let k = 0; k < 12; k += 1) paint += area(-40 + k * 46, -10 + k * 46, offsetM - 0.45, offsetM + 0.45);
  for (let k = 0; k < 6; k += 1) {
    const y = left + (widthM * (k + 0.75)) / 6.5;
    paint += area(560, 590, y - widthM / 26, y + widthM / 26);
  }
  return [
    { d: area(-200, 600, left, right), fill: 'var(--tone-3)', stroke: 'var(--ink-3)', width: 1, opacity: 0.55 },
    { d: paint, fill: 'var(--stage-sky)' },
  ];
}

/** The way behind the aeroplane, let down to the ground in stripes. */
function curtain(view: View, spec: PlateSpec): PlateShape[] {
  const shapes: PlateShape[] = [];
  const length = spec.shape.spanM;
  const track = rotation({ headingDeg: spec.attitude.headingDeg + spec.pathRightDeg, pitchDeg: 0, bankDeg: 0 });
  const at = (k: number): Vec => {
    const back = track([-spec.shape.finArmM * 1.1 - k * STRIPE_SPANS * length, 0, 0]);
    return [back[0], back[1], spec.heightM - 0.03 * k * STRIPE_SPANS * length];
  };
  let top: Point[] = [];
  for (let k = STRIPES; k >= 0; k -= 1) {
    const [a, b] = [at(k + 1), at(k)];
    const stripe = view.polygon([a, b, [b[0], b[1], 0], [a[0], a[1], 0]]);
    if (stripe.length > 2)
      shapes.push({ d: path(stripe, true), fill: 'var(--ink)', opacity: [0.05, 0.1, 0.07, 0.13][k % 4]! });
    const edge = view.segment(a, b);
    if (edge) top = [...top, ...edge];
  }
  shapes.push({ d: path(top, false), stroke: 'var(--ink)', width: 1.75 });
  return shapes;
}

function aeroplane(view: View, spec: PlateSpec, place: (v: Vec) => Vec): PlateShape[] {
  const { parts, discs } = buildAeroplane(spec.shape);
  // The side of the symmetry plane that is farther from the eye is painted first.
  const near = spec.sightDeg >= 0 ? 1 : -1;
  const rank = (side: number): number => (side === 0 ? 1 : side === near ? 2 : 0);
  const sorted = [...parts].sort((a, b) => rank(a.side) - rank(b.side) || a.order - b.order);
  const shapes: PlateShape[] = [];
  for (const part of sorted) shapes.push(...partShapes(view, part, place));
  // Discs are glass over everything: which engine is dead must be seen from any side.
  for (const disc of [...discs].sort((a, b) => rank(a.side) - rank(b.side))) {
    shapes.push(...discShapes(view, spec, disc, place));
  }
  return shapes;
}

function partShapes(view: View, part: SolidPart, place: (v: Vec) => Vec): PlateShape[] {
  const points = part.points.map(place);
  const picture = points.map((p) => view.point(p));
  const edges = new Map<string, number>();
  const shapes: PlateShape[] = [];
  part.faces.forEach((face, index) => {
    const corners = face.map((i) => points[i]!);
    const a = corners[0]!;
    let normal = polygonNormal(corners.map((corner) => sub(corner, a)));
    if (dot(normal, sub(a, place(part.insides[index]!))) < 0) normal = scale(normal, -1);
    const facing = dot(normal, sub(view.from, a)) > 0;
    face.forEach((from, i) => {
      const to = face[(i + 1) % face.length]!;
      const key = from < to ? `${from}-${to}` : `${to}-${from}`;
      edges.set(key, (edges.get(key) ?? 0) + (facing ? 1 : -1));
    });
    if (!facing) return;
    const outline = face.map((i) => picture[i]).filter((p): p is Point => p != null);
    const tone = Math.min(
      TONES.length - 1,
      Math.max(0, Math.floor(((dot(normal, LIGHT) + 0.5) / 1.25) * TONES.length)),
    );
    const fill = part.inkFaces?.includes(index) ? 'var(--stage-edge)' : TONES[tone]!;
    shapes.push({ d: path(outline, true), fill, stroke: fill, width: 0.7 });
  });
  let outline = '';
  for (const [key, sum] of edges) {
    if (sum !== 0) continue;
    const [from, to] = key.split('-').map((i) => picture[Number(i)]);
    if (from && to) outline += path([from, to], false);
  }
  shapes.push({ d: outline, stroke: 'var(--stage-edge)', width: 1.2 });
  return shapes;
}

function discShapes(view: View, spec: PlateSpec, disc: EngineDisc, place: (v: Vec) => Vec): PlateShape[] {
  const failed = spec.failed.includes(disc.index);
  const rim: Point[] = [];
  for (let i = 0; i < 40; i += 1) {
    const a = (i / 40) * 2 * Math.PI;
    const p = view.point(place(add(disc.centre, [0, disc.radiusM * Math.sin(a), disc.radiusM * Math.cos(a)])));
    if (p) rim.push(p);
  }
  const d = path(rim, true);
  // With every engine running no side is dead or live: the discs are plain.
  if (spec.failed.length === 0) return [{ d, stroke: 'var(--ink)', width: 1 }];
  if (!failed) return [{ d, fill: 'url(#h-live-l)', stroke: 'var(--live)', width: 1.5 }];
  const hatched: PlateShape = { d, fill: 'url(#h-dead-l)', stroke: 'var(--dead)', width: 1.75 };
  if (disc.kind === 'jet') return [hatched];
  let blades = '';
  const hub = view.point(place(disc.centre));
  for (const turn of [80, 200, 320]) {
    const tip = view.point(
      place(add(disc.centre, [0, disc.radiusM * Math.sin(turn * DEG), disc.radiusM * Math.cos(turn * DEG)])),
    );
    if (hub && tip) blades += path([hub, tip], false);
  }
  return [hatched, { d: blades, stroke: 'var(--dead)', width: 3.5 }];
}

function directions(view: View, spec: PlateSpec, place: (v: Vec) => Vec, shapes: PlateShape[]): Omit<Plate, 'shapes'> {
  const start = place([0.34 * spec.shape.spanM, 0, 0]);
  const reach = 0.62 * spec.shape.spanM;
  const ahead = (attitude: Attitude): Vec => add(start, rotation(attitude)([reach, 0, 0]));
  const { headingDeg, pitchDeg } = spec.attitude;
  const nose = view.segment(start, ahead({ headingDeg, pitchDeg, bankDeg: 0 }));
  const flown = view.segment(
    start,
    ahead({ headingDeg: headingDeg + spec.pathRightDeg, pitchDeg: pitchDeg + spec.pathUpDeg, bankDeg: 0 }),
  );
  const labels: PlateLabel[] = [];
  if (nose) {
    shapes.push({ d: path(nose, false), stroke: 'var(--ink)', width: 1, dash: '12 3 2 3' });
    labels.push({ text: 'nose', x: nose[1][0] - 9, y: nose[1][1] + 5, anchor: 'end' });
  }
  if (!flown) return { labels, ring: null };
  shapes.push({ d: path(flown, false), stroke: 'var(--stage-sky)', width: 6 });
  shapes.push({ d: path(flown, false), stroke: 'var(--ink)', width: 2.5 });
  labels.push({ text: 'flight path', x: flown[1][0] + 13, y: flown[1][1] + 5, anchor: 'start' });
  return { labels, ring: flown[1] };
}
