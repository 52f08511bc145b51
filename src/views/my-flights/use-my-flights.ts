import { useQuery } from '@pinia/colada';
import { useNow } from '@vueuse/core';
import { computed } from 'vue';
import { z } from 'zod';
import type { AttemptDetail } from '#shared/contracts/attempts.ts';
import { slugSchema } from '#shared/contracts/paging.ts';
import { useAddressQuery } from '../../composables/useAddressQuery.ts';
import { setRows, type SetRow } from '../../features/assignments/own-standing.ts';
import { getOwnAssignments } from '../../services/assignments-api.ts';
import { getAttempt, listAttempts } from '../../services/attempts-api.ts';
import { getScenario, listScenarios } from '../../services/scenarios-api.ts';
import { bestPedalS, pedalSeries } from './pedal-series.ts';
import { leastMargins } from './least-margins.ts';

export const SCENARIOS_A_PAGE = 6;
export const REPLAYS_A_PAGE = 6;
/** How many of the latest attempts the chart and the margins look at. */
export const LAST_ATTEMPTS = 9;

/** What stands in the address of the page: the scenario chosen, the page of the library, the page of the replays. */
const addressSchema = z.object({
  scenario: slugSchema.optional(),
  /** The assignment whose scenario is chosen. */
  assignment: z.uuid().optional(),
  list: z.coerce.number().int().min(1).max(10_000).default(1),
  page: z.coerce.number().int().min(1).max(10_000).default(1),
});

/** Everything the page reads, one query a figure, so that each fails and recovers on its own. */
export function useMyFlights() {
  const { query, set } = useAddressQuery(addressSchema);

  const scenarios = useQuery({
    key: () => ['scenarios', 'to-fly', query.value.list],
    query: ({ signal }) => listScenarios({ page: query.value.list, pageSize: SCENARIOS_A_PAGE, sort: 'title' }, signal),
    placeholderData: (before) => before,
  });
  const replays = useQuery({
    key: () => ['attempts', 'replays', query.value.page],
    query: ({ signal }) =>
      listAttempts({ page: query.value.page, pageSize: REPLAYS_A_PAGE, sort: '-startedAt' }, signal),
    placeholderData: (before) => before,
  });
  const latest = useQuery({
    key: ['attempts', 'latest', LAST_ATTEMPTS],
    query: ({ signal }) =>
      listAttempts({ page: 1, pageSize: LAST_ATTEMPTS, sort: '-startedAt', status: 'complete' }, signal),
  });
  const own = useQuery({
    key: ['assignments', 'mine'],
    query: ({ signal }) => getOwnAssignments(signal),
  });
  const now = useNow({ interval: 30_000 });
  const setForMe = computed(() => setRows(own.data.value ?? [], now.value));
  /** What is set and shown: the chosen one, else the first that is open. */
  const nextSet = computed<SetRow | null>(() => {
    const { scenario, assignment } = query.value;
    if (assignment !== undefined) {
      return setForMe.value.find((row) => row.assignment.id === assignment && row.scenario.slug === scenario) ?? null;
    }
    return scenario === undefined ? (setForMe.value.find((row) => row.open) ?? null) : null;
  });
  const latestIds = computed(() => latest.data.value?.items.map((attempt) => attempt.id) ?? []);
  const details = useQuery<AttemptDetail[]>({
    key: () => ['attempts', 'details', ...latestIds.value],
    query: ({ signal }) => Promise.all(latestIds.value.map((id) => getAttempt(id, signal))),
    enabled: () => latestIds.value.length > 0,
    placeholderData: (before) => before,
    staleTime: Infinity, // a computed result does not change
  });

  /** The chosen scenario; without a choice the first that is not met yet. */
  const nextSlug = computed(() => {
    const items = scenarios.data.value?.items ?? [];
    if (query.value.scenario !== undefined) return query.value.scenario;
    if (own.status.value === 'pending') return null;
    if (nextSet.value !== null) return nextSet.value.scenario.slug;
    const open = items.find((item) => !['met', 'near'].includes(item.attempts?.lastVerdict ?? ''));
    return (open ?? items[0])?.slug ?? null;
  });
  const next = useQuery({
    key: () => ['scenario', nextSlug.value, nextSet.value?.scenario.revision ?? 'latest'],
    query: ({ signal }) => getScenario(nextSlug.value ?? '', nextSet.value?.scenario.revision, signal),
    enabled: () => nextSlug.value !== null,
    placeholderData: (before) => before,
  });

  const pedals = computed(() => pedalSeries(details.data.value ?? []));
  const margins = computed(() => leastMargins(details.data.value ?? []));
  const nextSummary = computed(() => scenarios.data.value?.items.find((item) => item.slug === nextSlug.value) ?? null);
  const bestS = computed(() => (next.data.value ? bestPedalS(pedals.value, next.data.value.scenario.title) : null));
  const pedalLimitS = computed(() => {
    const judged = next.data.value?.scenario.criteria.find((each) => each.measure === 'first-correct-pedal');
    return judged && 'max' in judged.limit ? judged.limit.max : null;
  });

  return {
    query,
    set,
    own,
    setForMe,
    nextSet,
    now,
    scenarios,
    replays,
    latest,
    details,
    nextSlug,
    next,
    nextSummary,
    pedals,
    margins,
    bestS,
    pedalLimitS,
  };
}
