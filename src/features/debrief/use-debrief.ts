import { useQuery } from '@pinia/colada';
import { computed, ref } from 'vue';
import type { Debrief, NewSignOff } from '#shared/contracts/debrief.ts';
import { causeOf, isApiError } from '../../services/api-error.ts';
import { getDebrief, signAttempt, withdrawRemark, writeRemark } from '../../services/debrief-api.ts';

/** Remarks and signatures of an attempt, and the deeds that add to them. */
export function useDebrief(attemptId: () => string) {
  const { data, error, status, refetch } = useQuery({
    key: () => ['debrief', attemptId()],
    query: ({ signal }) => getDebrief(attemptId(), signal),
  });
  const newest = ref<{ id: string; debrief: Debrief } | null>(null);
  const busy = ref(false);
  const refusal = ref('');

  const debrief = computed(() => (newest.value?.id === attemptId() ? newest.value.debrief : (data.value ?? null)));

  async function act(deed: (id: string) => Promise<Debrief>): Promise<boolean> {
    const id = attemptId();
    busy.value = true;
    refusal.value = '';
    try {
      newest.value = { id, debrief: await deed(id) };
      return true;
    } catch (failure) {
      const first = isApiError(failure) ? failure.errors[0] : undefined;
      refusal.value = first ? `${first.message}. ${first.remedy}` : causeOf(failure);
      return false;
    } finally {
      busy.value = false;
    }
  }

  return {
    debrief,
    error,
    status,
    refetch,
    busy,
    refusal,
    remark: (tick: number, text: string) => act((id) => writeRemark(id, { tick, text })),
    withdraw: (remark: string) => act((id) => withdrawRemark(id, remark)),
    sign: (body: NewSignOff) => act((id) => signAttempt(id, body)),
  };
}
export type DebriefDeeds = ReturnType<typeof useDebrief>;
