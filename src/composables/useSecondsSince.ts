import { useIntervalFn } from '@vueuse/core';
import { type ComputedRef, computed, ref, toValue, type MaybeRefOrGetter } from 'vue';

const STEP_MS = 1000;

/** Whole seconds since an instant, counted each second; undefined while there is none. */
export function useSecondsSince(
  startMs: MaybeRefOrGetter<number | null>,
  now: () => number = Date.now,
): ComputedRef<number | undefined> {
  const present = ref(now());
  useIntervalFn(() => (present.value = now()), STEP_MS);
  return computed(() => {
    const start = toValue(startMs);
    return start === null ? undefined : Math.max(0, Math.round((present.value - start) / 1000));
  });
}
