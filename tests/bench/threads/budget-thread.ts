/** Thread that answers as the worker of the budget search does in the browser. */
import { answerJobs } from '../../../server/services/workers/answer-jobs.ts';
import { type BudgetMessage, createBudgetDesk } from '../../../src/runner/workers/budget-desk.ts';

const answer = createBudgetDesk();
answerJobs((message) => answer(message as BudgetMessage)); // posted by the row reaction-budget only
