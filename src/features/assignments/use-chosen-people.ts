import { computed, ref } from 'vue';
import type { Targets } from '#shared/contracts/assignments.ts';

/** Whom a form assigns to: whole cohorts, cohorts without some, and single people. */
export function useChosenPeople(targets: () => Targets | undefined) {
  const chosen = ref<ReadonlySet<string>>(new Set());

  const names = computed(() => new Map(targets()?.people.map((person) => [person.id, person]) ?? []));
  const activeOf = (members: readonly string[]): string[] =>
    members.filter((id) => names.value.get(id)?.active === true);

  /** Cohorts with how many of them are chosen. */
  const cohorts = computed(() =>
    (targets()?.cohorts ?? []).map((cohort) => {
      const members = activeOf(cohort.members);
      const here = members.filter((id) => chosen.value.has(id)).length;
      return { ...cohort, members, here, all: members.length > 0 && here === members.length };
    }),
  );
  const cohortOf = computed(() => {
    const found = new Map<string, string>();
    for (const { name, members } of cohorts.value) for (const id of members) if (!found.has(id)) found.set(id, name);
    return found;
  });
  const count = computed(() => chosen.value.size);

  function toggle(ids: readonly string[], on: boolean): void {
    const next = new Set(chosen.value);
    for (const id of ids) {
      if (on) next.add(id);
      else next.delete(id);
    }
    chosen.value = next;
  }

  /** A cohort of which more than half is chosen goes as the cohort without the rest, so that the overview can name it. */
  const body = computed(() => {
    const taken = cohorts.value.filter(({ here, members }) => here * 2 > members.length);
    const covered = new Set(taken.flatMap(({ members }) => members));
    return {
      cohorts: taken.map(({ id }) => id),
      without: [...covered].filter((id) => !chosen.value.has(id)),
      people: [...chosen.value].filter((id) => !covered.has(id)),
    };
  });

  /** What stands in the boxes above the list. */
  const chips = computed(() => {
    const taken = cohorts.value.filter(({ id }) => body.value.cohorts.includes(id));
    return [
      ...taken.map(({ id, name, members, here }) => ({ id, text: `Cohort ${name}, ${here}`, ids: members })),
      ...body.value.people.map((id) => ({ id, text: names.value.get(id)?.displayName ?? '', ids: [id] })),
    ];
  });

  return { chosen, cohorts, cohortOf, names, count, toggle, body, chips };
}
