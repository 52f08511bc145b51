import { onScopeDispose, ref, shallowRef, watch } from 'vue';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import type { CriterionBudget, ReactionBudget } from '#shared/scenario/reaction-budget.ts';
import type { Scenario } from '#shared/scenario/scenario-schema.ts';
import type { EventWindow, PreviewAnswer, PreviewQuestion, PreviewRun } from '../../runner/workers/scenario-preview.ts';

export interface PreviewInput {
  scenario: Scenario;
  airframe: Airframe;
  delayS: number;
}

/** The preview of the newest valid scenario. An older one stays in view, marked as stale, until the next is there. */
export function usePreview(input: () => PreviewInput | null) {
  const runs = shallowRef<{ handsOff: PreviewRun; reference: PreviewRun; warnings: string[] } | null>(null);
  const windows = shallowRef<EventWindow[]>([]);
  const budget = shallowRef<{ budget: ReactionBudget; criteria: CriterionBudget[] } | null>(null);
  const refusal = ref<string | null>(null);
  const busy = ref(false);
  const budgetBusy = ref(false);

  let worker: Worker | null = null;
  let asked = 0;
  let answered = 0;

  function stop(): void {
    worker?.terminate();
    worker = null;
  }
  function take(answer: PreviewAnswer): void {
    if (answer.id !== asked) return;
    answered = answer.id;
    if (answer.part === 'refused') {
      refusal.value = answer.message;
      busy.value = false;
      budgetBusy.value = false;
    } else if (answer.part === 'runs') {
      const { handsOff, reference, warnings } = answer;
      runs.value = { handsOff, reference, warnings };
      refusal.value = null;
      busy.value = false;
    } else if (answer.part === 'windows') windows.value = answer.windows;
    else {
      budget.value = { budget: answer.budget, criteria: answer.criteria };
      budgetBusy.value = false;
    }
  }
  function ask(next: PreviewInput): void {
    // A worker in the middle of an older question is not waited for.
    if (worker && answered !== asked) stop();
    if (budgetBusy.value) stop();
    if (!worker) {
      worker = new Worker(new URL('../../runner/workers/scenario-preview.worker.ts', import.meta.url), {
        type: 'module',
      });
      worker.addEventListener('message', (event: MessageEvent<PreviewAnswer>) => take(event.data));
      worker.addEventListener('error', (event) =>
        take({ id: asked, part: 'refused', message: event.message || 'the preview stopped' }),
      );
    }
    asked += 1;
    busy.value = true;
    budgetBusy.value = true;
    worker.postMessage({ ...next, id: asked } satisfies PreviewQuestion);
  }

  watch(
    input,
    (next) => {
      if (next) ask(next);
      else {
        // What was asked before no longer matters; what is shown stays until the errors are mended.
        stop();
        asked += 1;
        answered = asked;
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
