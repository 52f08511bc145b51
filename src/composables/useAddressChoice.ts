import { computed, type WritableComputedRef } from 'vue';
import { useRoute, useRouter } from 'vue-router';

/** What is chosen in a list, by its id in the address, so that it can be bookmarked and shared; null for nothing. */
export function useAddressChoice(name: string): WritableComputedRef<string | null> {
  const route = useRoute();
  const router = useRouter();
  return computed({
    get: () => {
      const value = route.query[name];
      return typeof value === 'string' && value !== '' ? value : null;
    },
    set: (id) => {
      const { [name]: _before, ...others } = route.query;
      void router.replace({ query: id === null ? others : { ...others, [name]: id }, hash: route.hash });
    },
  });
}
