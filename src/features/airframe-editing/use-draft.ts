import { computed, shallowRef, type ComputedRef } from 'vue';
import { parseAirframe, type Airframe } from '#shared/model/airframe-schema.ts';
import type { FieldIssue } from '#shared/model/field-issue.ts';
import {
  changedPointers,
  openDraft,
  recordChange,
  redo as redoStep,
  undo as undoStep,
  valueAtPointer,
  withValue,
  type DraftHistory,
  type Json,
} from './draft-document.ts';

export interface Draft {
  readonly document: ComputedRef<Json>;
  /** The parsed airframe, or the last one that parsed while the document has errors. */
  readonly airframe: ComputedRef<Airframe | null>;
  readonly issues: ComputedRef<readonly FieldIssue[]>;
  readonly warnings: ComputedRef<readonly FieldIssue[]>;
  readonly valid: ComputedRef<boolean>;
  readonly dirty: ComputedRef<boolean>;
  readonly changed: ComputedRef<ReadonlySet<string>>;
  readonly canUndo: ComputedRef<boolean>;
  readonly canRedo: ComputedRef<boolean>;
  open(document: Json, base?: Json | null): void;
  read(pointer: string): Json | undefined;
  write(pointer: string, value: Json | undefined, merge?: boolean): void;
  replace(document: Json, about: string): void;
  undo(): void;
  redo(): void;
  /** What the server now holds. */
  markSaved(document: Json): void;
}

/** One draft under edit: document, live validation by the format's own schema, undo, and what differs from its base. */
export function useDraft(): Draft {
  const history = shallowRef<DraftHistory>(openDraft(null));
  const base = shallowRef<Json | null>(null);
  const saved = shallowRef<Json>(null);
  let lastGood: Airframe | null = null;

  const parsed = computed(() => parseAirframe(history.value.present));
  const airframe = computed(() => {
    if (parsed.value.ok) lastGood = parsed.value.airframe;
    return lastGood;
  });
  return {
    document: computed(() => history.value.present),
    airframe,
    issues: computed(() => (parsed.value.ok ? [] : parsed.value.issues)),
    warnings: computed(() => (parsed.value.ok ? parsed.value.warnings : [])),
    valid: computed(() => parsed.value.ok),
    dirty: computed(() => history.value.present !== saved.value),
    changed: computed(() => new Set(base.value === null ? [] : changedPointers(base.value, history.value.present))),
    canUndo: computed(() => history.value.past.length > 0),
    canRedo: computed(() => history.value.future.length > 0),
    open(document, from = null) {
      lastGood = null;
      history.value = openDraft(document);
      saved.value = document;
      base.value = from;
    },
    read: (pointer) => valueAtPointer(history.value.present, pointer),
    write(pointer, value, merge = false) {
      history.value = recordChange(history.value, withValue(history.value.present, pointer, value), pointer, merge);
    },
    replace(document, about) {
      history.value = recordChange(history.value, document, about);
    },
    undo() {
      history.value = undoStep(history.value);
    },
    redo() {
      history.value = redoStep(history.value);
    },
    markSaved(document) {
      saved.value = document;
    },
  };
}
