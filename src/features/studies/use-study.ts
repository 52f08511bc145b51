import { useQuery } from '@pinia/colada';
import { computed, shallowRef, watch } from 'vue';
import { useRoute, useRouter } from 'vue-router';
import type { Study } from '#shared/contracts/studies.ts';
import { getStudy } from '../../services/studies-api.ts';
import { addressOf, asksForStudy } from './study-state.ts';

/** The study that the address names. An address that names only the study takes its other members from there. */
export function useStudy(id: () => string) {
  const route = useRoute();
  const router = useRouter();
  const fresh = shallowRef<Study | null>(null);
  const opened = useQuery({
    key: () => ['study', id()],
    enabled: () => id() !== '',
    query: ({ signal }) => getStudy(id(), signal),
  });
  const study = computed(() => {
    if (fresh.value?.id === id()) return fresh.value;
    return id() !== '' && opened.data.value?.id === id() ? opened.data.value : null;
  });
  /** Puts what was saved on view. */
  function show(saved: Study): void {
    fresh.value = saved;
    void router.replace({ query: addressOf(saved.id, saved.state) });
  }
  watch(
    [study, () => route.query],
    ([saved]) => {
      if (saved && asksForStudy(route.query) === saved.id) show(saved);
    },
    { immediate: true },
  );
  return { opened, study, show };
}
