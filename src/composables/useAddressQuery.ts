import { type ComputedRef, computed } from 'vue';
import { useRoute, useRouter } from 'vue-router';
import type { z } from 'zod';
import { parseAddress, toAddress } from './address-query.ts';

/**
 * The query of a list, kept in the address so that it can be bookmarked and shared. Parameters that are not of the
 * query stay as they are. A change goes back to the first page unless it names one; typing replaces, choosing adds to the history.
 */
export function useAddressQuery<S extends z.ZodObject>(
  schema: S,
): {
  query: ComputedRef<z.output<S>>;
  set: (change: Partial<z.output<S>>, replace?: boolean) => void;
  clear: (...names: (keyof z.output<S>)[]) => void;
} {
  const route = useRoute();
  const router = useRouter();
  const own = Object.keys(schema.shape);
  const query = computed(() => parseAddress(schema, route.query));

  function set(change: Partial<z.output<S>>, replace = false): void {
    const next = { ...query.value, page: 1, ...change };
    const others = Object.fromEntries(Object.entries(route.query).filter(([name]) => !own.includes(name)));
    const target = { query: { ...others, ...toAddress(schema, next) }, hash: route.hash };
    void (replace ? router.replace(target) : router.push(target));
  }

  function clear(...names: (keyof z.output<S>)[]): void {
    const standard = parseAddress(schema, {});
    const change: Partial<z.output<S>> = {};
    for (const name of names) change[name] = standard[name];
    set(change);
  }

  return { query, set, clear };
}
