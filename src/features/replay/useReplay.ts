import { computed, onScopeDispose, ref, shallowRef, watch } from 'vue';
import type { AttemptDetail } from '#shared/contracts/attempts.ts';
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import type { Replay } from '#shared/scenario/replay.ts';
import { DEBRIEF_CHANNELS } from '../../runner/channels.ts';
import { causeOf } from '../../services/api-error.ts';
import { openAttempt } from './open-attempt.ts';
import { type ReplaySurvey, surveyReplay } from './survey.ts';

export const REPLAY_RATES = [1, 0.5, 0.25] as const;

/** Loads an attempt, integrates it again from its chunks, and moves through it. */
export function useReplay(attemptId: () => string) {
  const attempt = shallowRef<AttemptDetail | null>(null);
  const replay = shallowRef<Replay | null>(null);
  const survey = shallowRef<ReplaySurvey | null>(null);
  const error = ref<string | null>(null);
  const playing = ref(false);
  const rate = ref<number>(1);
  const timeS = ref(0);
  let loading: AbortController | null = null;
  let exactS = 0;
  let lastMs: number | null = null;

  const durationS = computed(() => (replay.value ? replay.value.durationTicks / TICK_RATE_HZ : 0));

  async function load(): Promise<void> {
    loading?.abort();
    const mine = new AbortController();
    loading = mine;
    error.value = null;
    attempt.value = null;
    replay.value = null;
    survey.value = null;
    playing.value = false;
    try {
      const { detail, replay: made } = await openAttempt(attemptId(), mine.signal);
      if (loading !== mine) return;
      attempt.value = detail;
      if (!made) return;
      survey.value = surveyReplay(made, DEBRIEF_CHANNELS);
      replay.value = made;
      seek(0);
    } catch (cause) {
      if (mine.signal.aborted) return;
      error.value = causeOf(cause);
      console.warn('The replay could not be opened.', cause);
    }
  }

  function seek(toS: number): void {
    const made = replay.value;
    if (!made) return;
    exactS = Math.max(0, Math.min(durationS.value, toS));
    made.seek(Math.round(exactS * TICK_RATE_HZ));
    timeS.value = exactS;
  }

  function play(): void {
    if (!replay.value) return;
    if (exactS >= durationS.value - 1e-6) seek(0);
    lastMs = null;
    playing.value = true;
  }
  function pause(): void {
    playing.value = false;
  }

  /** Moves a playing replay on; called once an animation frame. */
  function frame(nowMs: number): void {
    if (!playing.value || !replay.value) return;
    const gap = lastMs === null ? 0 : Math.min(100, Math.max(0, nowMs - lastMs));
    lastMs = nowMs;
    seek(exactS + (gap / 1000) * rate.value);
    if (exactS >= durationS.value) playing.value = false;
  }

  watch(attemptId, () => void load());
  void load();
  onScopeDispose(() => loading?.abort());

  return { attempt, replay, survey, error, load, playing, play, pause, rate, timeS, durationS, seek, frame };
}
