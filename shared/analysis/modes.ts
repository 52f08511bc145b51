import { eigenvalues4Into } from '../numerics/eigen4.ts';
import { eigenDecomposition } from '../numerics/eigen.ts';
import { PI } from '../numerics/elementary.ts';
import { requireFinite } from '../numerics/errors.ts';
import { participation } from './mode-participation.ts';

/** `washout` is the root that the yaw damper's filter adds; the other kinds are the aeroplane's. */
export type ModeKind = 'dutch-roll' | 'roll' | 'spiral' | 'roll-spiral' | 'real-pair' | 'washout';

export interface Mode {
  kind: ModeKind;
  /** Real part; 1/s. */
  re: number;
  /** Imaginary part, ≥ 0; 1/s. */
  im: number;
  /** Undamped natural frequency of an oscillation; rad/s. */
  wn?: number;
  /** Damping ratio of an oscillation. */
  zeta?: number;
  /** Period of an oscillation; s. */
  periodS?: number;
  /** Time constant −1/λ of a real root; s; negative when it diverges. */
  tauS?: number;
  /** Time to half amplitude of a convergent mode; s. */
  halveS?: number;
  /** Time to double amplitude of a divergent mode; s. */
  doubleS?: number;
}

/** Degenerate and unstable cases by name. */
export type ModeRemark =
  | 'oscillatory-roll-spiral'
  | 'no-dutch-roll-oscillation'
  | 'repeated-roots'
  | 'neutral-root'
  | 'unstable-dutch-roll'
  | 'unstable-roll'
  | 'unstable-spiral'
  | 'unstable-roll-spiral'
  | 'divergent-real-pair'
  | 'unstable-washout';

export interface LateralModes {
  /** Dutch roll (or the real pair in its place) first, then roll, spiral (or roll–spiral), then washout. */
  modes: Mode[];
  remarks: ModeRemark[];
}

const LN2 = 0.6931471805599453;
/** A root nearer to zero than this fraction of the largest is neutral: no times are given for it. */
const NEUTRAL = 1e-12;
/** Roots nearer to each other than this fraction of the largest count as repeated. */
const REPEATED = 1e-6;
/** A pair in which the sideslip takes less part than this (both roots together) is an oscillation of bank, no Dutch roll. */
const DUTCH_ROLL_SHARE = 0.3;

const ORDER: readonly ModeKind[] = ['dutch-roll', 'real-pair', 'roll', 'roll-spiral', 'spiral', 'washout'];

interface Root {
  re: number;
  im: number;
}

/**
 * The lateral modes of x' = A x with x = [β, p, r, φ], and a fifth washout state where the yaw damper is on.
 *
 * Eigenvalues named by which state takes part in which (`participation`): the oscillation with most sideslip is the Dutch
 * roll; a second oscillation is the coupled roll–spiral; of four real roots the two with most sideslip stand in place of
 * the Dutch roll. Of the two other real roots the faster is the roll mode. Repeated roots are named by magnitude alone,
 * because their shapes are not independent.
 *
 * @param a  System matrix; n×n row-major; 1/s; angles in rad.
 * @param n  4 or 5.
 * @returns  Modes and remarks; one mode per real root and per complex pair.
 * @throws {NumericsError} non-finite-input, bad-dimension, no-convergence.
 * @sign     none
 * @source   Etkin & Reid, Dynamics of Flight, 3rd ed. 1996, sections 6.1 and 6.7; the naming rule is ours.
 */
export function lateralModes(a: ArrayLike<number>, n: 4 | 5 = 4): LateralModes {
  const roots = eigenvalues(a, n);
  const largest = roots.reduce((most, root) => Math.max(most, size(root)), 0);
  const repeated = hasRepeated(roots, largest);
  const share = (root: Root, state: number) => participation(a, n, root.re, root.im, state);
  const modes: Mode[] = [];
  let left = roots;
  if (n === 5) {
    const reals = roots.filter((root) => root.im === 0);
    const washout = largestBy(reals, (root) => (repeated ? -Math.abs(root.re) : share(root, 4)));
    modes.push(modeOf('washout', washout, largest));
    left = roots.filter((root) => root !== washout);
  }
  for (const [kind, root] of nameRoots(left, share, repeated)) modes.push(modeOf(kind, root, largest));
  modes.sort((x, y) => ORDER.indexOf(x.kind) - ORDER.indexOf(y.kind) || x.re - y.re);
  return { modes, remarks: remarksOf(modes, repeated, largest) };
}

/** The kinds of four roots (complex pairs count as one here). */
function nameRoots(roots: Root[], share: (root: Root, state: number) => number, repeated: boolean): [ModeKind, Root][] {
  const pairs = roots.filter((root) => root.im > 0);
  const reals = roots.filter((root) => root.im === 0).sort((x, y) => x.re - y.re);
  if (pairs.length === 2) {
    const dutch = largestBy(pairs, (root) => (repeated ? size(root) : share(root, 0)));
    return pairs.map((root) => [root === dutch ? 'dutch-roll' : 'roll-spiral', root]);
  }
  if (pairs.length === 1) {
    const isDutch = repeated || 2 * share(pairs[0], 0) >= DUTCH_ROLL_SHARE;
    if (!isDutch) return [['roll-spiral', pairs[0]], ...reals.map((root): [ModeKind, Root] => ['real-pair', root])];
    const roll = largestBy(reals, size);
    return [
      ['dutch-roll', pairs[0]],
      ...reals.map((root): [ModeKind, Root] => [root === roll ? 'roll' : 'spiral', root]),
    ];
  }
  const bySideslip = repeated
    ? [reals[1], reals[2], reals[0], reals[3]]
    : [...reals].sort((x, y) => share(y, 0) - share(x, 0));
  const others = bySideslip.slice(2);
  const roll = largestBy(others, size);
  return [
    ...bySideslip.slice(0, 2).map((root): [ModeKind, Root] => ['real-pair', root]),
    ...others.map((root): [ModeKind, Root] => [root === roll ? 'roll' : 'spiral', root]),
  ];
}

/** One entry per real root and per complex pair. */
function eigenvalues(a: ArrayLike<number>, n: 4 | 5): Root[] {
  requireFinite(a, n * n, 'system matrix');
  const roots: Root[] = [];
  if (n === 4) {
    const out = new Float64Array(8);
    eigenvalues4Into(out, Float64Array.from(a));
    for (let i = 0; i < 4; i++) if (out[2 * i + 1] >= 0) roots.push({ re: out[2 * i], im: out[2 * i + 1] });
  } else {
    const { re, im } = eigenDecomposition(a, n);
    for (let i = 0; i < n; i++) if (im[i] >= 0) roots.push({ re: re[i], im: im[i] });
  }
  return roots;
}

/**
 * The figures of one root: frequency, damping, times.
 *
 * @param kind     What it is called.
 * @param root     Root; 1/s; imaginary part ≥ 0.
 * @param largest  Magnitude of the largest root of the system; 1/s; what "neutral" is measured against.
 * @returns        The mode; times that do not exist are absent.
 * @throws         Nothing.
 * @sign           tauS is −1/λ: negative when the root diverges.
 * @source         Etkin & Reid, Dynamics of Flight, 3rd ed. 1996, eq. 6.1,13–6.1,16.
 */
export function modeOf(kind: ModeKind, root: Root, largest: number): Mode {
  const mode: Mode = { kind, re: root.re, im: root.im };
  if (root.im > 0) {
    mode.wn = size(root);
    mode.zeta = -root.re / mode.wn;
    mode.periodS = (2 * PI) / root.im;
  }
  if (Math.abs(root.re) > NEUTRAL * largest) {
    if (root.im === 0) mode.tauS = -1 / root.re;
    if (root.re < 0) mode.halveS = -LN2 / root.re;
    else mode.doubleS = LN2 / root.re;
  }
  return mode;
}

function remarksOf(modes: Mode[], repeated: boolean, largest: number): ModeRemark[] {
  const remarks: ModeRemark[] = [];
  if (modes.some((mode) => mode.kind === 'roll-spiral')) remarks.push('oscillatory-roll-spiral');
  if (!modes.some((mode) => mode.kind === 'dutch-roll')) remarks.push('no-dutch-roll-oscillation');
  if (repeated) remarks.push('repeated-roots');
  const neutral = (mode: Mode) => Math.abs(mode.re) <= NEUTRAL * largest;
  if (modes.some(neutral)) remarks.push('neutral-root');
  for (const mode of modes) {
    if (mode.re <= 0 || neutral(mode)) continue;
    const name: ModeRemark = mode.kind === 'real-pair' ? 'divergent-real-pair' : `unstable-${mode.kind}`;
    if (!remarks.includes(name)) remarks.push(name);
  }
  return remarks;
}

function size(root: Root): number {
  return Math.sqrt(root.re * root.re + root.im * root.im);
}

function hasRepeated(roots: Root[], largest: number): boolean {
  const limit = REPEATED * largest;
  for (let i = 0; i < roots.length; i++) {
    // A pair about to meet on the real axis is a repeated root too.
    if (roots[i].im > 0 && roots[i].im < limit) return true;
    for (let j = 0; j < i; j++) {
      if (size({ re: roots[i].re - roots[j].re, im: roots[i].im - roots[j].im }) <= limit) return true;
    }
  }
  return largest === 0;
}

function largestBy<T>(items: T[], value: (item: T) => number): T {
  return items.reduce((best, item) => (value(item) > value(best) ? item : best));
}
