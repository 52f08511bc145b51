/** Thread that searches reaction budgets: seconds of integration each. */
import { budgetJobSchema, budgetOfJob } from '../records/budget-job.ts';
import { answerJobs } from './answer-jobs.ts';

answerJobs((message) => budgetOfJob(budgetJobSchema.parse(message)));
