import { type Ref, computed, onScopeDispose, ref, shallowRef, watch } from 'vue';
import type { AttemptDetail, AttemptSummary } from '#shared/contracts/attempts.ts';
import { DEFAULT_DELAY_S } from '#shared/scenario/reference-pilot.ts';
import type { Replay } from '#shared/scenario/replay.ts';
import { DEBRIEF_CHANNELS } from '../../runner/channels.ts';
import type { ReferenceRun } from '../../runner/workers/reference-types.ts';
import { causeOf } from '../../services/api-error.ts';
import { listAttempts } from '../../services/attempts-api.ts';
import { type Ghost, createGhost } from '../fly/ghost.ts';
import { useReferenceRun } from '../fly/useReferenceRun.ts';
import { sampleReplay, shiftRun } from './compared-run.ts';
import { openAttempt } from './open-attempt.ts';
import { surveyReplay } from './survey.ts';

export const REFERENCE = 'reference';
export const NOTHING = 'nothing';

interface Compared {
  id: string;
  run: ReferenceRun;
  /** Run time of its first event; s. */
  zeroS: number;
}

/** What the replay is laid over: the reference pilot, or another attempt of the same person at the same scenario. */
export function useComparison(input: {
  attempt: Readonly<Ref<AttemptDetail | null>>;
  replay: Readonly<Ref<Replay | null>>;
  zeroS: Readonly<Ref<number>>;
  mine: Readonly<Ref<boolean>>;
}) {
  const { attempt, replay, zeroS, mine } = input;
  const choice = ref<string>(REFERENCE);
  const others = shallowRef<AttemptSummary[]>([]);
  const opened = shallowRef<Compared | null>(null);
  const error = ref<string | null>(null);
  let loading: AbortController | null = null;

  const reference = useReferenceRun(() => {
    const known = attempt.value;
    return known && replay.value
      ? {
          scenario: known.scenario,
          airframe: known.airframe.airframe,
          seed: known.seed,
          drawn: known.drawn,
          delayS: DEFAULT_DELAY_S,
        }
      : null;
  });

  watch(attempt, async (known) => {
    choice.value = REFERENCE;
    others.value = [];
    if (!known) return;
    try {
      const page = await listAttempts({
        scenario: known.scenarioSlug,
        status: 'complete',
        pageSize: 100,
        ...(mine.value ? {} : { person: known.person.id }),
      });
      if (attempt.value === known) others.value = page.items.filter((item) => item.id !== known.id);
    } catch (cause) {
      // The replay stands without them; the choice then holds the reference alone.
      console.warn('Other attempts could not be listed.', cause);
    }
  });

  watch(choice, async (id) => {
    loading?.abort();
    error.value = null;
    if (id === REFERENCE || id === NOTHING || opened.value?.id === id) return;
    const own = new AbortController();
    loading = own;
    opened.value = null;
    try {
      const { replay: other } = await openAttempt(id, own.signal);
      if (loading !== own || !other) return;
      const { zeroS: otherZero } = surveyReplay(other, DEBRIEF_CHANNELS);
      opened.value = { id, run: sampleReplay(other), zeroS: otherZero };
    } catch (cause) {
      if (!own.signal.aborted) error.value = causeOf(cause);
    }
  });
  onScopeDispose(() => loading?.abort());

  const run = computed<ReferenceRun | null>(() => {
    if (choice.value === NOTHING) return null;
    if (choice.value === REFERENCE) return reference.value;
    const other = opened.value;
    return other && other.id === choice.value ? shiftRun(other.run, zeroS.value - other.zeroS) : null;
  });
  const columns = computed(() => {
    const shown = run.value;
    if (!shown) return null;
    return DEBRIEF_CHANNELS.map((id) => Array.from(shown.columns[id], (value) => (Number.isNaN(value) ? null : value)));
  });
  const ghost = computed<Ghost | null>(() =>
    replay.value && run.value ? createGhost(replay.value.run.now, run.value) : null,
  );
  const options = computed(() => [
    { value: REFERENCE, text: 'reference pilot, 1 s' },
    ...others.value.map((item) => ({ value: item.id, text: `attempt ${item.number}` })),
    { value: NOTHING, text: 'nothing' },
  ]);
  const waiting = computed(() => choice.value !== NOTHING && run.value === null && error.value === null);

  return { choice, options, run, columns, ghost, waiting, error };
}
