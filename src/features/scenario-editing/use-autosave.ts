import { onScopeDispose, ref, watch } from 'vue';
import { causeOf, isApiError } from '../../services/api-error.ts';
import { getScenarioDraft, saveScenarioDraft } from '../../services/scenario-editing-api.ts';
import type { ScenarioDraft } from '#shared/contracts/scenario-editing.ts';
import { jsonOf } from '../airframe-editing/draft-document.ts';
import type { ScenarioDraftState } from './use-scenario-draft.ts';

/** Long enough that typing is not sent letter by letter. */
const QUIET_MS = 900;
const RETRY_MS = 5000;

export type SaveState = 'saved' | 'waiting' | 'saving' | 'failed' | 'conflict';

/** Keeps the draft on the server as it stands; what another person saved meanwhile is never overwritten unasked. */
export function useAutosave(draft: ScenarioDraftState, at: () => { slug: string; revision: number }) {
  const state = ref<SaveState>('saved');
  const problem = ref<string | null>(null);
  const theirs = ref<ScenarioDraft | null>(null);
  const savedAt = ref<string | null>(null);
  let version: string | null = null;
  let timer: ReturnType<typeof setTimeout> | undefined;
  let running: Promise<void> | null = null;

  function opened(found: ScenarioDraft): void {
    version = found.version;
    savedAt.value = found.changedAt;
    state.value = 'saved';
    problem.value = null;
    theirs.value = null;
  }

  async function save(): Promise<void> {
    if (version === null || state.value === 'conflict' || !draft.dirty.value) return;
    const { slug, revision } = at();
    const document = draft.document.value;
    if (typeof document !== 'object' || document === null) return;
    state.value = 'saving';
    try {
      const kept = await saveScenarioDraft(slug, revision, version, document);
      version = kept.version;
      savedAt.value = kept.changedAt;
      draft.markSaved(document);
      problem.value = null;
      state.value = draft.dirty.value ? 'waiting' : 'saved';
    } catch (error) {
      problem.value = causeOf(error);
      if (isApiError(error, 'changed-meanwhile')) {
        state.value = 'conflict';
        theirs.value = await getScenarioDraft(slug, revision).catch(() => null);
      } else {
        state.value = 'failed';
        timer = setTimeout(() => void flush(), RETRY_MS);
      }
    }
  }
  /** Saves now what is not saved yet. */
  async function flush(): Promise<void> {
    clearTimeout(timer);
    await running;
    running = save().finally(() => (running = null));
    await running;
  }
  watch(
    () => draft.document.value,
    () => {
      if (!draft.dirty.value || state.value === 'conflict') return;
      state.value = 'waiting';
      clearTimeout(timer);
      timer = setTimeout(() => void flush(), QUIET_MS);
    },
  );
  onScopeDispose(() => {
    clearTimeout(timer);
    void save();
  });

  return {
    state,
    problem,
    theirs,
    savedAt,
    opened,
    flush,
    version: () => version,
    /** Takes what the other person saved; what was here can be brought back with undo. */
    takeTheirs(): void {
      const found = theirs.value;
      if (!found) return;
      draft.replace(jsonOf(found.document), 'theirs');
      draft.markSaved(draft.document.value);
      opened(found);
    },
    /** Saves what is here over what the other person saved; theirs can be brought back with undo. */
    async keepMine(): Promise<void> {
      const found = theirs.value;
      if (!found) return;
      const mine = draft.document.value;
      draft.replace(jsonOf(found.document), 'theirs');
      draft.markSaved(draft.document.value);
      draft.replace(mine, 'mine');
      version = found.version;
      state.value = 'waiting';
      theirs.value = null;
      await flush();
    },
  };
}
export type Autosave = ReturnType<typeof useAutosave>;
