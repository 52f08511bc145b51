/** The workers of a search for the reaction budget: one for each core, started when they are first needed. */
import type { BudgetMessage, BudgetReply } from './budget-desk.ts';
import { type BudgetDesk, type BudgetFound, type BudgetQuestion, searchOverDesks } from './budget-search.ts';

const MOST_WORKERS = 4;

export interface BudgetWorkers {
  /** Searches; gives up the search before. Null when it was given up itself. */
  search(question: BudgetQuestion): Promise<BudgetFound | null>;
  /** Gives up what is being searched. */
  giveUp(): void;
  close(): void;
}

export function createBudgetWorkers(): BudgetWorkers {
  let workers: Worker[] = [];
  let newest = 0;
  /** The search before: its workers are busy with their last delay until it has ended. */
  let before: Promise<unknown> = Promise.resolve();

  function desks(): BudgetDesk[] {
    if (workers.length === 0) {
      const count = Math.max(1, Math.min(MOST_WORKERS, navigator.hardwareConcurrency));
      workers = Array.from(
        { length: count },
        () => new Worker(new URL('./budget.worker.ts', import.meta.url), { type: 'module' }),
      );
    }
    return workers.map((worker) => (message) => ask(worker, message));
  }

  return {
    search(question) {
      const mine = ++newest;
      const wanted = (): boolean => mine === newest;
      const searching = before.then(() => (wanted() ? searchOverDesks(desks(), question, wanted) : null));
      before = searching.catch(() => undefined);
      return searching;
    },
    giveUp() {
      newest += 1;
    },
    close() {
      newest += 1;
      for (const worker of workers) worker.terminate();
      workers = [];
    },
  };
}

function ask(worker: Worker, message: BudgetMessage): Promise<BudgetReply> {
  return new Promise((resolve) => {
    worker.onmessage = (event: MessageEvent<BudgetReply>) => resolve(event.data);
    worker.onerror = (event) => resolve({ kind: 'refused', message: event.message || 'the search stopped' });
    worker.postMessage(message);
  });
}
