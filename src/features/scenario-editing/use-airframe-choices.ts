import { useQuery } from '@pinia/colada';
import { computed } from 'vue';
import { listAirframes } from '../../services/airframes-api.ts';

/** Released airframe revisions to choose from: of each airframe the newest. */
export function useAirframeChoices() {
  const { data } = useQuery({
    key: ['airframes', 'released', 'choices'],
    query: ({ signal }) => listAirframes({ status: 'released', pageSize: 100, sort: 'name' }, signal),
  });
  return computed(() =>
    (data.value?.items ?? []).map(({ slug, revision, name }) => ({
      value: `${slug} ${revision}`,
      text: `${name}, revision ${revision}`,
    })),
  );
}
