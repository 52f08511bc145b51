import { onScopeDispose, ref, shallowRef, watch } from 'vue';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import type { CriterionBudget, ReactionBudget } from '#shared/scenario/reaction-budget.ts';
import type { Scenario } from '#shared/scenario/scenario-schema.ts';
import { createBudgetWorkers } from '../../runner/workers/budget-workers.ts';
import type { EventWindow, PreviewAnswer, PreviewQuestion, PreviewRun } from '../../runner/workers/scenario-preview.ts';

/** How long drawing may take before the search for the budget begins. */
const AFTER_PICTURE_MS = 30;

export interface PreviewInput {
  scenario: Scenario;
  airframe: Airframe;
  delayS: number;
}

interface ShownRuns {
  /** What was flown; the text may have gone on since. */
  scenario: Scenario;
  handsOff: PreviewRun;
  reference: PreviewRun;
  warnings: string[];
}

/** The preview of the newest valid scenario. An older one stays in view, marked as stale, until the next is there. */
export function usePreview(input: () => PreviewInput | null) {
  const runs = shallowRef<ShownRuns | null>(null);
  const windows = shallowRef<EventWindow[]>([]);
  const budget = shallowRef<{ budget: ReactionBudget; criteria: CriterionBudget[] } | null>(null);
  const refusal = ref<string | null>(null);
  const busy = ref(false);
  const budgetBusy = ref(false);

  let worker: Worker | null = null;
  let asked = 0;
  const budgetWorkers = createBudgetWorkers();

  function take(answer: PreviewAnswer, question: PreviewQuestion): void {
    if (answer.id !== asked) return;
    if (answer.part === 'refused') {
      refusal.value = answer.message;
      busy.value = false;
      budgetBusy.value = false;
    } else if (answer.part === 'runs') {
      const { handsOff, reference, warnings } = answer;
      runs.value = { scenario: question.scenario, handsOff, reference, warnings };
      refusal.value = null;
      busy.value = false;
      // Only after the picture, so that it has the processors to itself.
      requestAnimationFrame(() => setTimeout(() => void search(question), AFTER_PICTURE_MS));
    } else windows.value = answer.windows;
  }
  async function search(question: PreviewQuestion): Promise<void> {
    if (question.id !== asked) return;
    try {
      const found = await budgetWorkers.search(question);
      if (found === null || question.id !== asked) return;
      budget.value = found;
      budgetBusy.value = false;
    } catch (error) {
      const message = error instanceof Error ? error.message : 'the search for the budget stopped';
      take({ id: question.id, part: 'refused', message }, question);
    }
  }
  function ask(next: PreviewInput): void {
    asked += 1;
    const question: PreviewQuestion = { ...next, id: asked };
    budgetWorkers.giveUp();
    worker ??= new Worker(new URL('../../runner/workers/scenario-preview.worker.ts', import.meta.url), {
      type: 'module',
    });
    worker.onmessage = (event: MessageEvent<PreviewAnswer>) => take(event.data, question);
    worker.onerror = (event) =>
      take({ id: asked, part: 'refused', message: event.message || 'the preview stopped' }, question);
    busy.value = true;
    budgetBusy.value = true;
    worker.postMessage(question);
  }
  function stop(): void {
    worker?.terminate();
    worker = null;
    budgetWorkers.close();
  }

  watch(
    input,
    (next) => {
      if (next) ask(next);
      else {
        // What was asked before no longer matters; what is shown stays until the errors are mended.
        asked += 1;
        budgetWorkers.giveUp();
        busy.value = false;
        budgetBusy.value = false;
      }
    },
    { immediate: true },
  );
  onScopeDispose(stop);

  return { runs, windows, budget, refusal, busy, budgetBusy };
}
export type Preview = ReturnType<typeof usePreview>;
