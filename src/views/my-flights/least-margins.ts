import type { AttemptDetail } from '#shared/contracts/attempts.ts';
import { measureWords } from '../measure-words.ts';

type Criterion = NonNullable<AttemptDetail['result']>['criteria'][number];

/** The least margin of one measure over some attempts. */
export interface LeastMargin {
  measure: string;
  title: string;
  margin: number | null;
  unit: string;
  limit: Criterion['limit'];
  verdict: Criterion['verdict'];
}

/** Smaller is worse: never measured first, then the margin relative to the limit. */
function badness(criterion: Criterion): number {
  if (criterion.margin === null) return criterion.verdict === 'not-met' ? -Infinity : Infinity;
  const { max, min, within } = criterion.limit;
  const size = within ? Math.abs(within[1] - within[0]) / 2 : Math.abs(max ?? min ?? 1);
  return criterion.margin / (size > 0 ? size : 1);
}

/** One entry a measure, worst first. Criteria whose window never opened are left out. */
export function leastMargins(attempts: readonly AttemptDetail[]): LeastMargin[] {
  const worst = new Map<string, Criterion>();
  for (const criterion of attempts.flatMap((attempt) => attempt.result?.criteria ?? [])) {
    if (criterion.verdict === 'not-reached') continue;
    const before = worst.get(criterion.measure);
    if (!before || badness(criterion) < badness(before)) worst.set(criterion.measure, criterion);
  }
  return [...worst.values()]
    .sort((a, b) => badness(a) - badness(b))
    .map(({ measure, title, margin, limit, verdict }) => ({
      measure,
      title: measure === 'expression' ? title : measureWords(measure),
      margin,
      unit: limit.unit,
      limit,
      verdict,
    }));
}
