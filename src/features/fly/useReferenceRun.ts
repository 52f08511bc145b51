import { type ShallowRef, onScopeDispose, shallowRef, watch } from 'vue';
import type { ReferenceQuestion, ReferenceRun } from '../../runner/workers/reference-types.ts';
import { type ReferenceRequest, requestReference } from './reference-client.ts';

/** The reference pilot's run of what `question` names; null until it is there and when there is none. */
export function useReferenceRun(
  question: () => Omit<ReferenceQuestion, 'id'> | null,
): Readonly<ShallowRef<ReferenceRun | null>> {
  const run = shallowRef<ReferenceRun | null>(null);
  let asked: ReferenceRequest | null = null;
  watch(
    question,
    async (next) => {
      asked?.cancel();
      run.value = null;
      if (!next) return;
      const mine = requestReference(next);
      asked = mine;
      const answer = await mine.answer;
      if (asked === mine) run.value = answer;
    },
    { immediate: true },
  );
  onScopeDispose(() => asked?.cancel());
  return run;
}
