import type { AttemptDetail } from '#shared/contracts/attempts.ts';

/** First correct pedal of one attempt, beside the limit of its scenario. */
export interface PedalAttempt {
  attemptId: string;
  scenarioTitle: string;
  number: number;
  /** Seconds since the failure; null when the pedal never came. */
  valueS: number | null;
  limitS: number | null;
  met: boolean;
}

/** The attempts that were judged by it, oldest first. */
export function pedalSeries(attempts: readonly AttemptDetail[]): PedalAttempt[] {
  return [...attempts]
    .sort((a, b) => a.startedAt.localeCompare(b.startedAt))
    .flatMap((attempt) => {
      const criterion = attempt.result?.criteria.find((each) => each.measure === 'first-correct-pedal');
      if (!criterion || criterion.verdict === 'not-reached') return [];
      return [
        {
          attemptId: attempt.id,
          scenarioTitle: attempt.scenarioTitle,
          number: attempt.number,
          valueS: criterion.value,
          limitS: criterion.limit.max ?? null,
          met: criterion.verdict !== 'not-met',
        },
      ];
    });
}

/** Fastest correct pedal of one scenario; null when there is none. */
export function bestPedalS(series: readonly PedalAttempt[], scenarioTitle: string): number | null {
  const values = series.flatMap((each) =>
    each.scenarioTitle === scenarioTitle && each.valueS !== null ? [each.valueS] : [],
  );
  return values.length === 0 ? null : Math.min(...values);
}
