import { onUnmounted, shallowRef, watch } from 'vue';
import { useRoute, useRouter } from 'vue-router';
import { fromQuery, toQuery, type BenchState } from './bench-state.ts';

/** While something is dragged the address rests; browsers limit how often it may change. */
const ADDRESS_RESTS_MS = 200;

/** The state of the Analysis screen. Changes count at once; the address follows when they pause, and Back brings them back. */
export function useBenchState() {
  const route = useRoute();
  const router = useRouter();
  const home = route.name;
  const state = shallowRef<BenchState>(fromQuery(route.query));
  let written = JSON.stringify(toQuery(state.value));
  let timer: ReturnType<typeof setTimeout> | undefined;

  watch(
    () => route.query,
    (query) => {
      if (route.name !== home) return;
      const arrived = fromQuery(query);
      const text = JSON.stringify(toQuery(arrived));
      if (text === written) return;
      clearTimeout(timer);
      written = text;
      state.value = arrived;
    },
  );
  function write(): void {
    const query = toQuery(state.value);
    written = JSON.stringify(query);
    void router.replace({ query });
  }
  function set(members: Partial<BenchState>): void {
    state.value = { ...state.value, ...members };
    clearTimeout(timer);
    timer = setTimeout(write, ADDRESS_RESTS_MS);
  }
  onUnmounted(() => clearTimeout(timer));
  return { state, set };
}
