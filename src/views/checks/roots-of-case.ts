/** The roots that belong to a case of a modes group: published and computed, gathered from the lines of one matrix or set. */
import type { CheckLine, OutcomeLine } from '../../runner/workers/checks/checks-types.ts';

export interface RootPair {
  name: string;
  published: { re: number; im: number };
  /** Null until it has run. */
  computed: { re: number; im: number } | null;
}
export interface CaseRoots {
  /** Which matrix or set: the quantity before its colon. */
  what: string;
  roots: RootPair[];
}

const SUFFIX = /-(?:spiral|roll|dutch-re|dutch-im)$/u;

/** Null for a case without a whole set of roots (spiral, roll and Dutch roll of one matrix). */
export function rootsOfCase(
  line: CheckLine,
  lines: readonly CheckLine[],
  outcomes: ReadonlyMap<string, OutcomeLine>,
): CaseRoots | null {
  const family = (base: string): CheckLine[] | null => {
    const found = ['spiral', 'roll', 'dutch-re', 'dutch-im'].map((part) =>
      lines.find((other) => other.id === `${base}-${part}` && other.group === line.group),
    );
    return found.every((one) => one !== undefined) ? found : null;
  };
  const bases = [line, ...lines.filter((other) => other.group === line.group)]
    .filter(({ id }) => SUFFIX.test(id))
    .map(({ id }) => id.replace(SUFFIX, ''));
  const members = bases.map(family).find((found) => found !== null);
  if (!members) return null;
  const [spiral, roll, re, im] = members;
  const published = (of: CheckLine): number => of.published ?? 0;
  const computed = (of: CheckLine): number | null => outcomes.get(of.id)?.computed ?? null;
  const pair = (name: string, real: CheckLine, imaginary: CheckLine | null): RootPair => {
    const x = computed(real);
    const y = imaginary === null ? 0 : computed(imaginary);
    return {
      name,
      published: { re: published(real), im: imaginary === null ? 0 : published(imaginary) },
      computed: x === null || y === null ? null : { re: x, im: y },
    };
  };
  return {
    what: spiral.quantity.split(':')[0],
    roots: [pair('Dutch roll', re, im), pair('Roll', roll, null), pair('Spiral', spiral, null)],
  };
}

/** Rule of thumb beside the exact value, for the case that has both. */
export interface Approximation {
  what: string;
  exact: string;
  approximate: string;
}

const APPROXIMATIONS: readonly Approximation[] = [
  { what: 'Roll, one degree of freedom', exact: 'etkin-matrix-roll', approximate: 'etkin-roll' },
  { what: 'Roll, with the spiral', exact: 'etkin-matrix-roll', approximate: 'etkin-quick' },
  { what: 'Spiral, with the roll', exact: 'etkin-matrix-spiral', approximate: 'etkin-slow' },
  { what: 'Dutch roll ω', exact: 'etkin-omega', approximate: 'etkin-two-omega' },
  { what: 'Dutch roll ζ', exact: 'etkin-zeta', approximate: 'etkin-two-zeta' },
];

/** The approximations of a case's group; empty where it has none, or where they have not run. */
export function approximationsOf(
  line: CheckLine,
  lines: readonly CheckLine[],
  outcomes: ReadonlyMap<string, OutcomeLine>,
): { what: string; exact: number; approximate: number; apart: string }[] {
  const inGroup = (id: string): boolean => lines.some((other) => other.id === id && other.group === line.group);
  return APPROXIMATIONS.flatMap(({ what, exact: exactId, approximate: approximateId }) => {
    const exact = outcomes.get(exactId)?.computed ?? null;
    const approximate = outcomes.get(approximateId)?.computed ?? null;
    if (exact === null || approximate === null || !inGroup(exactId)) return [];
    const ratio = approximate / exact;
    const apart = ratio > 2 ? `× ${ratio.toFixed(1)}` : `${Math.abs(100 * (ratio - 1)).toFixed(0)} %`;
    return [{ what, exact, approximate, apart }];
  });
}
