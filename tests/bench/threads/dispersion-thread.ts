/** Thread that flies portions of a dispersion. */
import { flyDispersion, type DispersionJob } from '#shared/scenario/dispersion-of-runs.ts';
import { answerJobs } from '../../../server/services/workers/answer-jobs.ts';

/** What is counted of a portion. */
export interface DispersionPart {
  runs: number;
  passed: number;
  problems: number;
}

answerJobs((message): DispersionPart => {
  const rows = flyDispersion(message as DispersionJob); // posted by the row dispersion-10k only
  return {
    runs: rows.length,
    passed: rows.filter(({ passed }) => passed).length,
    problems: rows.filter(({ problem }) => problem !== null).length,
  };
});
