import { onUnmounted, ref, shallowRef, watch, type Ref } from 'vue';
import { OvertakenError, type BenchClient, type PictureOf } from '../../runner/workers/analysis/bench-client.ts';
import type { BenchRequest } from '../../runner/workers/analysis/analysis.worker.ts';

/**
 * The newest picture of a request that changes: asked again whenever it changes, overtaken answers dropped. While a newer
 * one is on its way the last picture stays and `stale` is true.
 */
export function useBenchPicture<R extends BenchRequest>(client: BenchClient, request: Ref<R | null>) {
  const picture = shallowRef<PictureOf<R> | null>(null);
  const stale = ref(false);
  const problem = ref('');
  let closed = false;

  watch(
    request,
    async (wanted) => {
      if (!wanted) return;
      stale.value = true;
      try {
        const answer = await client.ask(wanted);
        if (closed) return;
        picture.value = answer;
        problem.value = '';
        stale.value = request.value !== wanted;
      } catch (error) {
        if (closed || error instanceof OvertakenError) return;
        problem.value = error instanceof Error ? error.message : 'The figures could not be computed.';
        stale.value = false;
      }
    },
    { immediate: true },
  );
  onUnmounted(() => {
    closed = true;
  });
  return { picture, stale, problem };
}
