import { useQueryCache } from '@pinia/colada';
import { onScopeDispose, ref, type Ref, watch } from 'vue';
import type { AttemptSummary } from '#shared/contracts/attempts.ts';
import type { ReplayMoment } from './replay-moment.ts';

/**
 * Moments of the attempts shown, one after another once the lists are there: each is a replay integrated again in this
 * browser, so it must not hold up the page. An attempt whose replay cannot be opened keeps its empty frame.
 */
export function useReplayMoments(attempts: Ref<readonly AttemptSummary[]>) {
  const cache = useQueryCache();
  const moments = ref<ReadonlyMap<string, ReplayMoment>>(new Map());
  let turn = 0;

  async function read(ids: readonly string[], mine: number): Promise<void> {
    const { loadMoment } = await import('./load-moment.ts');
    for (const id of ids) {
      if (turn !== mine) return;
      if (moments.value.has(id)) continue;
      const entry = cache.ensure({
        key: ['moment', id],
        query: ({ signal }) => loadMoment(id, signal),
        staleTime: Infinity, // a recording does not change
      });
      const { data } = await cache.refresh(entry).catch(() => ({ data: undefined }));
      if (data) moments.value = new Map(moments.value).set(id, data);
      await new Promise((rest) => setTimeout(rest, 0));
    }
  }

  watch(
    attempts,
    (shown) => {
      turn += 1;
      const ids = shown.filter((attempt) => attempt.status === 'complete').map((attempt) => attempt.id);
      if (ids.length > 0) void read(ids, turn);
    },
    { immediate: true },
  );
  onScopeDispose(() => (turn += 1));

  return { momentOf: (id: string): ReplayMoment | null => moments.value.get(id) ?? null };
}
