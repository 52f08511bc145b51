import { useQuery } from '@pinia/colada';
import { computed, type Ref } from 'vue';
import type { BenchSubject } from '../../runner/workers/analysis/bench-condition.ts';
import { getAirframeRevision, listAirframes } from '../../services/airframes-api.ts';
import { comparedRevisions, type BenchState } from './bench-state.ts';

/** The revision that is looked at and up to three beside it, read from the server. */
export function useBenchSubjects(state: Ref<BenchState>) {
  const list = useQuery({
    key: () => ['airframes', 'for-analysis'],
    query: ({ signal }) => listAirframes({ pageSize: 100, sort: 'name' }, signal),
  });
  const slug = computed(() => state.value.airframe || (list.data.value?.items[0]?.slug ?? ''));
  const revision = computed(
    () => state.value.revision || (list.data.value?.items.find((a) => a.slug === slug.value)?.revision ?? 0),
  );
  const main = useQuery({
    key: () => ['airframe-revision', slug.value, revision.value],
    enabled: () => slug.value !== '' && revision.value > 0,
    query: ({ signal }) => getAirframeRevision(slug.value, revision.value, signal),
  });
  const compared = useQuery({
    key: () => ['airframe-compare', state.value.compare],
    enabled: () => state.value.compare !== '',
    query: ({ signal }) =>
      Promise.all(comparedRevisions(state.value.compare).map((r) => getAirframeRevision(r.slug, r.revision, signal))),
  });
  const airframe = computed(() => main.data.value?.airframe ?? null);
  const subjects = computed<BenchSubject[]>(() => {
    const lead = main.data.value;
    if (!lead) return [];
    const label = (s: string, n: number): string => (s === lead.slug ? `revision ${n}` : `${s} ${n}`);
    const others = state.value.compare === '' ? [] : (compared.data.value ?? []);
    return [
      { label: label(lead.slug, lead.revision), airframe: lead.airframe },
      ...others.map((o) => ({ label: label(o.slug, o.revision), airframe: o.airframe })),
    ];
  });
  return { list, slug, revision, main, compared, airframe, subjects };
}
