/** Worker: one share of a search for the reaction budget. */
import { type BudgetMessage, createBudgetDesk } from './budget-desk.ts';

const answer = createBudgetDesk();
self.addEventListener('message', (event: MessageEvent<BudgetMessage>) => self.postMessage(answer(event.data)));
