import { type Ref, ref, watch } from 'vue';
import type { AttemptSummary } from '#shared/contracts/attempts.ts';
import type { ReplayMoment } from './replay-moment.ts';

/** Moments of the attempts shown, computed from their replays after the page itself is there. */
export function useReplayMoments(attempts: Ref<readonly AttemptSummary[]>) {
  const moments = ref<ReadonlyMap<string, ReplayMoment>>(new Map());
  watch(attempts, () => undefined, { immediate: true });
  return { momentOf: (id: string): ReplayMoment | null => moments.value.get(id) ?? null };
}
