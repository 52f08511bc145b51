/**
 * A plain aeroplane as flat-faced solids in body axes, from a handful of lengths. Invented proportions; it stands for
 * a class of aeroplane (two or four engines, propellers on the wing or jets under it), not for one type.
 */
import { DEG, type Vec } from './projection.ts';

export interface SolidPart {
  /** Faces as indices into `points`. */
  faces: readonly (readonly number[])[];
  points: readonly Vec[];
  /** Inside point, for telling outside from inside; one per face. */
  insides: readonly Vec[];
  /** −1 left of the symmetry plane, +1 right, 0 on it. */
  side: -1 | 0 | 1;
  /** Painted after parts of lower order on the same side, seen from above. */
  order: number;
  /** Faces painted in ink (windscreen). */
  inkFaces?: readonly number[];
}

export interface EngineShape {
  kind: 'propeller' | 'jet';
  yM: number;
}

export interface AeroplaneShape {
  spanM: number;
  chordM: number;
  finArmM: number;
  finHeightM: number;
  engines: readonly EngineShape[];
  /** Trailing edge to the right positive, as the right pedal moves it; deg. */
  rudderDeg: number;
}

/** Circle that a propeller sweeps, or the intake of a jet. */
export interface EngineDisc {
  index: number;
  kind: EngineShape['kind'];
  centre: Vec;
  radiusM: number;
  side: -1 | 0 | 1;
}

const RING = 14;

/** Skin over elliptic rings along x: [x, half width, half height, z of the centre]. */
function loft(
  rings: readonly (readonly [number, number, number, number])[],
  y: number,
): Omit<SolidPart, 'side' | 'order'> {
  const points: Vec[] = [];
  const faces: number[][] = [];
  const insides: Vec[] = [];
  rings.forEach(([x, w, h, z]) => {
    for (let i = 0; i < RING; i += 1) {
      const a = (i / RING) * 2 * Math.PI + Math.PI / RING;
      points.push([x, y + w * Math.sin(a), z + h * Math.cos(a)]);
    }
  });
  for (let ring = 0; ring + 1 < rings.length; ring += 1) {
    const [xa, , , za] = rings[ring]!;
    const [xb, , , zb] = rings[ring + 1]!;
    for (let i = 0; i < RING; i += 1) {
      const j = (i + 1) % RING;
      faces.push([ring * RING + i, ring * RING + j, (ring + 1) * RING + j, (ring + 1) * RING + i]);
      insides.push([(xa + xb) / 2, y, (za + zb) / 2]);
    }
  }
  const end = (rings.length - 1) * RING;
  const tail = rings[rings.length - 1]!;
  faces.push(Array.from({ length: RING }, (_, i) => end + i));
  insides.push([tail[0] + 0.2, y, tail[3]]);
  return { points, faces, insides };
}

/** A flat panel with thickness: outline in order, moved by half of `thick` along ± `normal`. */
function panel(outline: readonly Vec[], normal: Vec, thick: number): Omit<SolidPart, 'side' | 'order'> {
  const n = outline.length;
  const shift = (v: Vec, k: number): Vec => [v[0] + normal[0] * k, v[1] + normal[1] * k, v[2] + normal[2] * k];
  const points = [...outline.map((v) => shift(v, thick / 2)), ...outline.map((v) => shift(v, -thick / 2))];
  const middle = outline.reduce<Vec>((sum, v) => [sum[0] + v[0] / n, sum[1] + v[1] / n, sum[2] + v[2] / n], [0, 0, 0]);
  const faces: number[][] = [
    outline.map((_, i) => i),
    outline.map((_, i) => n + i),
    ...outline.map((_, i) => [i, (i + 1) % n, n + ((i + 1) % n), n + i]),
  ];
  return { points, faces, insides: faces.map(() => middle) };
}

export function buildAeroplane(shape: AeroplaneShape): { parts: SolidPart[]; discs: EngineDisc[] } {
  const { spanM: b, chordM: c, finArmM: arm, finHeightM } = shape;
  const jet = shape.engines.some((engine) => engine.kind === 'jet');
  const width = jet ? 0.055 * b : 0.062 * b;
  const nose = jet ? 0.47 * b : 0.34 * b;
  const tail = -arm - 0.03 * b;
  const fuselage = loft(
    [
      [nose, 0.02, 0.02, -0.35 * width],
      [nose - 0.25 * width, 0.34 * width, 0.34 * width, -0.32 * width],
      [nose - 0.9 * width, 0.68 * width, 0.66 * width, -0.2 * width],
      [nose - 1.9 * width, 0.92 * width, 0.95 * width, -0.04 * width],
      [nose - 3.2 * width, width, 1.12 * width, 0.06 * width],
      [-0.6 * c, width, 1.1 * width, 0.06 * width],
      [tail * 0.55, 0.66 * width, 0.76 * width, 0.22 * width],
      [tail * 0.85, 0.33 * width, 0.42 * width, 0.36 * width],
      [tail - 0.03 * b, 0.12 * width, 0.16 * width, 0.44 * width],
    ],
    0,
  );
  const parts: SolidPart[] = [{ ...fuselage, side: 0, order: 2, inkFaces: windscreen }];

  const sweep = jet ? 0.5 : 0.06;
  const dihedral = 0.09;
  const wingZ = -0.62 * width;
  for (const side of [-1, 1] as const) {
    const at = (x: number, y: number): Vec => [x, side * y, wingZ + dihedral * y];
    const wing = (y: number, share: number): [Vec, Vec] => {
      const chord = c * (1.28 - 0.62 * share);
      const lead = 0.42 * c - sweep * y;
      return [at(lead, y), at(lead - chord, y)];
    };
    const [rootLead, rootTrail] = wing(0.4 * width, 0);
    const [midLead, midTrail] = wing(0.25 * b, 0.5);
    const [tipLead, tipTrail] = wing(0.488 * b, 0.98);
    const tipY = 0.5 * b;
    const tip: Vec[] = [at(tipLead[0] - 0.16 * c, tipY), at(tipTrail[0] + 0.1 * c, tipY)];
    parts.push({
      ...panel([rootLead, midLead, tipLead, tip[0]!, tip[1]!, tipTrail, midTrail, rootTrail], [0, 0, 1], 0.05 * c),
      side,
      order: 1,
    });
    const stab = 0.17 * b;
    const stabZ = 0.5 * width;
    const outline: Vec[] = [
      [-arm + 0.34 * c, side * 0.15 * width, stabZ],
      [-arm + 0.16 * c - 0.3 * sweep * stab, side * stab, stabZ + 0.02 * stab],
      [-arm - 0.32 * c - 0.3 * sweep * stab, side * stab, stabZ + 0.02 * stab],
      [-arm - 0.36 * c, side * 0.15 * width, stabZ],
    ];
    parts.push({ ...panel(outline, [0, 0, 1], 0.04 * c), side, order: 4 });
  }
  const finTop = 0.5 * width + Math.max(1.7 * finHeightM, 0.165 * b);
  const finThick = 0.07 * c;
  const hinge: readonly [Vec, Vec] = [
    [-arm - 0.14 * c, 0, finTop],
    [-arm - 0.2 * c, 0, 0.45 * width],
  ];
  const fin: Vec[] = [[-arm + 0.78 * c, 0, 0.6 * width], [-arm + 0.12 * c, 0, finTop], ...hinge];
  parts.push({ ...panel(fin, [0, 1, 0], finThick), side: 0, order: 5 });
  const [sd, cd] = [Math.sin(shape.rudderDeg * DEG), Math.cos(shape.rudderDeg * DEG)];
  const behind = ([x, , z]: Vec, chord: number): Vec => [x - chord * cd, chord * sd, z];
  const rudder = [hinge[1], hinge[0], behind(hinge[0], 0.3 * c), behind(hinge[1], 0.36 * c)];
  parts.push({ ...panel(rudder, [sd, cd, 0], 0.8 * finThick), side: 0, order: 6 });

  const discs: EngineDisc[] = [];
  shape.engines.forEach((engine, index) => {
    const y = engine.yM;
    const side = y < 0 ? -1 : y > 0 ? 1 : 0;
    const prop = engine.kind === 'propeller';
    if (side === 0) {
      discs.push({ index, kind: engine.kind, centre: [nose + 0.06, 0, -0.3 * width], radiusM: 0.085 * b, side });
      return;
    }
    const lead = 0.42 * c - sweep * Math.abs(y);
    const z = wingZ + dihedral * Math.abs(y) + (prop ? 0.05 * c : -0.3 * c);
    const r = prop ? 0.25 * c : 0.24 * c;
    const front = lead + (prop ? 0.78 * c : 0.5 * c);
    const nacelle = loft(
      prop
        ? [
            [front, 0.25 * r, 0.25 * r, z],
            [front - 0.22 * c, 0.8 * r, 0.8 * r, z],
            [front - 0.62 * c, r, 1.05 * r, z],
            [lead - 0.35 * c, 0.95 * r, 0.95 * r, z],
            [lead - 0.95 * c, 0.62 * r, 0.6 * r, z - 0.05 * c],
            [lead - 1.3 * c, 0.28 * r, 0.28 * r, z - 0.06 * c],
          ]
        : [
            [front, 0.92 * r, 0.92 * r, z],
            [front - 0.3 * c, r, r, z],
            [front - 0.75 * c, 0.9 * r, 0.9 * r, z],
            [front - 1.15 * c, 0.55 * r, 0.55 * r, z],
          ],
      y,
    );
    parts.push({ ...nacelle, side, order: prop ? 2 : 0 });
    discs.push({ index, kind: engine.kind, centre: [front + 0.02, y, z], radiusM: prop ? 0.085 * b : 0.92 * r, side });
  });
  return { parts, discs };
}

/** Upper faces of the fourth band of the fuselage. */
const windscreen = [0, 1, 2, 11, 12, 13].map((i) => 2 * RING + i);
