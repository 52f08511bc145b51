/** Vectors and the pinhole camera of the plates. World and body axes here: x forward, y right, z up; metres. */
export type Vec = readonly [number, number, number];

export const add = (a: Vec, b: Vec): Vec => [a[0] + b[0], a[1] + b[1], a[2] + b[2]];
export const sub = (a: Vec, b: Vec): Vec => [a[0] - b[0], a[1] - b[1], a[2] - b[2]];
export const scale = (a: Vec, k: number): Vec => [a[0] * k, a[1] * k, a[2] * k];
export const dot = (a: Vec, b: Vec): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
export const cross = (a: Vec, b: Vec): Vec => [
  a[1] * b[2] - a[2] * b[1],
  a[2] * b[0] - a[0] * b[2],
  a[0] * b[1] - a[1] * b[0],
];
export const unit = (a: Vec): Vec => scale(a, 1 / (Math.hypot(...a) || 1));

/** Normal of a polygon whose corners may lie on one line (Newell's method); its sense follows their order. */
export function polygonNormal(points: readonly Vec[]): Vec {
  let sum: Vec = [0, 0, 0];
  points.forEach((p, i) => {
    sum = add(sum, cross(p, points[(i + 1) % points.length] as Vec));
  });
  return unit(sum);
}

export const DEG = Math.PI / 180;

/** Heading right of world x, nose up and right wing down positive; deg. */
export interface Attitude {
  headingDeg: number;
  pitchDeg: number;
  bankDeg: number;
}

/** Turns body vectors into world vectors. */
export function rotation({ headingDeg, pitchDeg, bankDeg }: Attitude): (v: Vec) => Vec {
  const [sh, ch] = [Math.sin(headingDeg * DEG), Math.cos(headingDeg * DEG)];
  const [sp, cp] = [Math.sin(pitchDeg * DEG), Math.cos(pitchDeg * DEG)];
  const [sb, cb] = [Math.sin(bankDeg * DEG), Math.cos(bankDeg * DEG)];
  return ([x, y, z]) => {
    const y1 = y * cb + z * sb;
    const z1 = -y * sb + z * cb;
    const x2 = x * cp - z1 * sp;
    const z2 = x * sp + z1 * cp;
    return [x2 * ch - y1 * sh, x2 * sh + y1 * ch, z2];
  };
}

export interface Camera {
  from: Vec;
  headingDeg: number;
  /** Positive looks down; deg. */
  downDeg: number;
  /** Focal length; px. */
  focal: number;
  centre: readonly [number, number];
}

export type Point = readonly [number, number];

export interface View {
  /** Picture point, or null behind the near plane. */
  point(v: Vec): Point | null;
  /** Distance along the line of sight; m. */
  depth(v: Vec): number;
  /** A segment cut at the near plane, or null when all of it is behind. */
  segment(a: Vec, b: Vec): readonly [Point, Point] | null;
  /** A polygon cut at the near plane. */
  polygon(points: readonly Vec[]): Point[];
  /** Picture y of the horizon. */
  horizonY: number;
  from: Vec;
}

const NEAR_M = 0.5;

export function createView(camera: Camera): View {
  const [s, c] = [Math.sin(camera.headingDeg * DEG), Math.cos(camera.headingDeg * DEG)];
  const [sd, cd] = [Math.sin(camera.downDeg * DEG), Math.cos(camera.downDeg * DEG)];
  const forward: Vec = [c * cd, s * cd, -sd];
  const right: Vec = [-s, c, 0];
  const up: Vec = [c * sd, s * sd, cd];
  const [cx, cy] = camera.centre;

  const depth = (v: Vec): number => dot(sub(v, camera.from), forward);
  const project = (v: Vec): Point => {
    const d = sub(v, camera.from);
    const k = camera.focal / dot(d, forward);
    return [cx + k * dot(d, right), cy - k * dot(d, up)];
  };
  const cut = (a: Vec, b: Vec): Vec => {
    const [da, db] = [depth(a), depth(b)];
    return add(a, scale(sub(b, a), (NEAR_M - da) / (db - da)));
  };
  return {
    from: camera.from,
    horizonY: cy - camera.focal * (sd / cd),
    depth,
    point: (v) => (depth(v) > NEAR_M ? project(v) : null),
    segment(a, b) {
      const [inA, inB] = [depth(a) > NEAR_M, depth(b) > NEAR_M];
      if (!inA && !inB) return null;
      return [project(inA ? a : cut(a, b)), project(inB ? b : cut(a, b))];
    },
    polygon(points) {
      const out: Point[] = [];
      points.forEach((p, i) => {
        const q = points[(i + 1) % points.length] as Vec;
        const [inP, inQ] = [depth(p) > NEAR_M, depth(q) > NEAR_M];
        if (inP) out.push(project(p));
        if (inP !== inQ) out.push(project(cut(p, q)));
      });
      return out;
    },
  };
}
