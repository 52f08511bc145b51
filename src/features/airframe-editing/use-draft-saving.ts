/** Saving of a draft by itself, and what happens when another engineer saved the same draft meanwhile. */
import { watchDebounced } from '@vueuse/core';
import { computed, type ComputedRef, onScopeDispose, type Ref, ref, shallowRef, watch } from 'vue';
import type { AirframeDraft } from '#shared/contracts/airframe-editing.ts';
import { causeOf, isApiError } from '../../services/api-error.ts';
import { getDraft, saveDraft } from '../../services/airframe-editing-api.ts';
import { jsonOf, type Json } from './draft-document.ts';
import { compareDrafts, mergeDrafts, type DraftComparison, type Side } from './merge-drafts.ts';
import type { Draft } from './use-draft.ts';

export type SavingState = 'saved' | 'waiting' | 'saving' | 'failed' | 'conflict';

export interface DraftConflict {
  theirs: Json;
  version: string;
  changedBy: string | null;
  changedAt: string;
  comparison: DraftComparison;
}

export interface DraftSaving {
  readonly state: Ref<SavingState>;
  readonly failure: Ref<string>;
  readonly conflict: Ref<DraftConflict | null>;
  /** When the server last took it; empty before. */
  readonly savedAt: Ref<string>;
  readonly words: ComputedRef<string>;
  /** The draft as the server holds it: editing begins. */
  begin(got: AirframeDraft, base: Json | null): void;
  /** Something that is not edited here. */
  show(document: Json, base: Json | null): void;
  save(): Promise<void>;
  /** Both versions together, then saved; undo brings back this page's own. */
  keepBoth(choice: (pointer: string) => Side): Promise<void>;
  /** The other engineer's version; undo brings back this page's own. */
  takeTheirs(): void;
}

const SAVE_AFTER_MS = 900;

export function useDraftSaving(
  draft: Draft,
  place: () => { slug: string; revision: number },
  readOnly: Ref<boolean>,
): DraftSaving {
  const state = ref<SavingState>('saved');
  const failure = ref('');
  const conflict = shallowRef<DraftConflict | null>(null);
  const savedAt = ref('');
  let version = '';
  let saved: Json = null;

  function begin(got: AirframeDraft, base: Json | null): void {
    version = got.version;
    savedAt.value = got.changedAt;
    saved = jsonOf(got.document);
    draft.open(saved, base);
    conflict.value = null;
    state.value = 'saved';
  }

  async function save(): Promise<void> {
    if (readOnly.value || !draft.dirty.value || state.value === 'saving' || state.value === 'conflict') return;
    const { slug, revision } = place();
    const sent = draft.document.value;
    state.value = 'saving';
    try {
      const answer = await saveDraft(slug, revision, version, sent);
      version = answer.version;
      savedAt.value = answer.changedAt;
      saved = sent;
      draft.markSaved(sent);
      state.value = draft.dirty.value ? 'waiting' : 'saved';
      if (draft.dirty.value) await save();
    } catch (error) {
      failure.value = causeOf(error);
      if (isApiError(error) && error.status === 412) await meet();
      else state.value = 'failed';
    }
  }
  /** Reads what the other engineer saved and sets both versions side by side. */
  async function meet(): Promise<void> {
    const { slug, revision } = place();
    try {
      const got = await getDraft(slug, revision);
      const theirs = jsonOf(got.document);
      conflict.value = {
        theirs,
        version: got.version,
        changedBy: got.changedBy,
        changedAt: got.changedAt,
        comparison: compareDrafts(saved, draft.document.value, theirs),
      };
      state.value = 'conflict';
    } catch (error) {
      failure.value = causeOf(error);
      state.value = 'failed';
    }
  }
  /** From here on their version is what this page's changes are measured against. */
  function settle(now: DraftConflict, document: Json): void {
    version = now.version;
    savedAt.value = now.changedAt;
    saved = now.theirs;
    draft.replace(document, 'two versions');
    draft.markSaved(now.theirs);
    conflict.value = null;
    state.value = draft.dirty.value ? 'waiting' : 'saved';
  }

  watch(draft.document, () => {
    if (draft.dirty.value && state.value === 'saved') state.value = 'waiting';
    else if (!draft.dirty.value && state.value === 'waiting') state.value = 'saved';
  });
  // Leaving the page saves by itself; what still waits when the page is gone must not be sent again.
  let gone = false;
  onScopeDispose(() => (gone = true));
  watchDebounced(draft.document, () => (gone ? undefined : void save()), { debounce: SAVE_AFTER_MS });

  return {
    state,
    failure,
    conflict,
    savedAt,
    words: computed(() => {
      if (readOnly.value) return '';
      if (state.value === 'saving') return 'saving';
      if (state.value === 'waiting') return 'not saved yet';
      if (state.value !== 'saved') return 'not saved';
      if (savedAt.value === '') return 'saved';
      return `saved ${new Date(savedAt.value).toLocaleTimeString([], { hour: '2-digit', minute: '2-digit' })}`;
    }),
    begin,
    show(document, base) {
      draft.open(document, base);
      conflict.value = null;
      state.value = 'saved';
    },
    save,
    async keepBoth(choice) {
      const now = conflict.value;
      if (!now) return;
      // Edited on while the choice was open: what this page holds now is compared, not what it held then.
      const mine = draft.document.value;
      settle(now, mergeDrafts(mine, now.theirs, compareDrafts(saved, mine, now.theirs), choice));
      await save();
    },
    takeTheirs() {
      const now = conflict.value;
      if (now) settle(now, now.theirs);
    },
  };
}
