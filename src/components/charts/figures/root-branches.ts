/** Roots of a sweep as branches, and names beside a line in rows. */
import type { PlotRoot } from './plot-types.ts';

interface BranchPoint {
  text: string;
  re: number;
  im: number;
  step: number;
}

/**
 * Oscillatory roots followed from step to step: each goes on the branch whose last root is nearest, else begins one.
 * @param longest a branch does not jump further than this from one step to the next, 1/s
 */
export function oscillatoryBranches(
  locus: readonly { text: string; roots: readonly PlotRoot[] }[],
  longest: number,
): BranchPoint[][] {
  const branches: BranchPoint[][] = [];
  locus.forEach(({ text, roots }, step) => {
    const open = branches.filter((branch) => branch.at(-1)?.step === step - 1);
    for (const { re, im } of roots.filter((root) => root.im > 1e-9)) {
      const far = (branch: BranchPoint[]): number =>
        Math.hypot((branch.at(-1)?.re ?? NaN) - re, (branch.at(-1)?.im ?? NaN) - im);
      const nearest = open
        .filter((branch) => branch.at(-1)?.step === step - 1 && far(branch) < longest)
        .sort((a, b) => far(a) - far(b))[0];
      if (nearest) nearest.push({ text, re, im, step });
      else branches.push([{ text, re, im, step }]);
    }
  });
  return branches;
}

/** Row 0 or 1 for each name centred at a place on a line: two that would touch stand in different rows. */
export function staggered(names: readonly { at: number; half: number }[]): number[] {
  const rows = names.map(() => 0);
  let before = { end: -Infinity, row: 1 };
  const order = names.map((_, i) => i).sort((a, b) => (names[a]?.at ?? 0) - (names[b]?.at ?? 0));
  for (const i of order) {
    const { at, half } = names[i] ?? { at: 0, half: 0 };
    const row = at - half < before.end ? 1 - before.row : 0;
    rows[i] = row;
    before = { end: at + half + 4, row };
  }
  return rows;
}
