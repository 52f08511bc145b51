/** How the expected number is known: seen in a copy of the source, from memory, or worked out independently. */
export type Provenance = 'seen' | 'memory' | 'computed' | 'common practice';

interface CaseBase {
  /** Stable, unique; kebab-case. */
  id: string;
  /** Heading under which the Checks page lists it. */
  group: string;
  quantity: string;
  provenance: Provenance;
  source: string;
}

/** A number to be met within a tolerance. */
export interface ValueCase extends CaseBase {
  kind: 'value';
  published: number;
  unit: string;
  tolerance: { absolute: number } | { relative: number };
  compute(): number;
}

/** A statement of sign or order to be met. */
export interface FactCase extends CaseBase {
  kind: 'fact';
  statement: string;
  compute(): { holds: boolean; shown: string };
}

export type PublishedCase = ValueCase | FactCase;

export type Verdict = 'agrees' | 'differs' | 'failed';

export interface CheckOutcome {
  case: PublishedCase;
  verdict: Verdict;
  /** Computed number of a value case. */
  computed: number | null;
  /** |computed − published| in units of the tolerance; at most 1 agrees. */
  deviation: number | null;
  /** What a fact showed, or why the computation failed. */
  detail: string;
}

/** The tolerance as an absolute distance; unit of the value. */
export function toleranceOf(check: ValueCase): number {
  return 'absolute' in check.tolerance
    ? check.tolerance.absolute
    : check.tolerance.relative * Math.abs(check.published);
}

/**
 * Runs one case.
 *
 * @param check  The case.
 * @returns      Computed value beside published value with a verdict; a case that throws is "failed" with the reason.
 * @throws       Nothing.
 * @sign         none
 * @source       none
 */
export function runCheck(check: PublishedCase): CheckOutcome {
  try {
    if (check.kind === 'fact') {
      const { holds, shown } = check.compute();
      return { case: check, verdict: holds ? 'agrees' : 'differs', computed: null, deviation: null, detail: shown };
    }
    const computed = check.compute();
    const deviation = Math.abs(computed - check.published) / toleranceOf(check);
    return { case: check, verdict: deviation <= 1 ? 'agrees' : 'differs', computed, deviation, detail: '' };
  } catch (error) {
    const detail = error instanceof Error ? error.message : String(error);
    return { case: check, verdict: 'failed', computed: null, deviation: null, detail };
  }
}
