/** Thread that integrates recordings again, so that the event loop is never held up by one. */
import { rerunJobSchema, resultOfRun } from '../attempts/result-of-run.ts';
import { answerJobs } from './answer-jobs.ts';

answerJobs((message) => resultOfRun(rerunJobSchema.parse(message)));
