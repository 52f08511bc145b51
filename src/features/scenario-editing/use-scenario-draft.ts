import { computed, shallowRef } from 'vue';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import type { FieldIssue } from '#shared/model/field-issue.ts';
import { type Scenario, checkAgainstAirframe, parseScenario } from '#shared/scenario/scenario-schema.ts';
import {
  type DraftHistory,
  type Json,
  openDraft,
  recordChange,
  redo as redoStep,
  undo as undoStep,
  valueAtPointer,
  withValue,
} from '../airframe-editing/draft-document.ts';

/** One scenario under edit: document, undo to the start of the session, validation by schema and airframe. */
export function useScenarioDraft(airframe: () => Airframe | null) {
  const history = shallowRef<DraftHistory>(openDraft(null));
  const saved = shallowRef<Json>(null);

  const parsed = computed(() => parseScenario(history.value.present));
  const fit = computed(() => {
    const known = airframe();
    return parsed.value.ok && known ? checkAgainstAirframe(parsed.value.scenario, known) : null;
  });
  const issues = computed<readonly FieldIssue[]>(() =>
    parsed.value.ok ? (fit.value?.issues ?? []) : parsed.value.issues,
  );
  const warnings = computed<readonly FieldIssue[]>(() =>
    parsed.value.ok ? [...parsed.value.warnings, ...(fit.value?.warnings ?? [])] : [],
  );
  /** The scenario as it would run; null while the document has errors. */
  const scenario = computed<Scenario | null>(() =>
    parsed.value.ok && issues.value.length === 0 ? parsed.value.scenario : null,
  );

  const read = (pointer: string): Json | undefined => valueAtPointer(history.value.present, pointer);
  const list = (pointer: string): readonly Json[] => {
    const value = read(pointer);
    return Array.isArray(value) ? value : [];
  };
  function write(pointer: string, value: Json | undefined, merge = false): void {
    history.value = recordChange(history.value, withValue(history.value.present, pointer, value), pointer, merge);
  }

  return {
    document: computed(() => history.value.present),
    scenario,
    issues,
    warnings,
    dirty: computed(() => history.value.present !== saved.value),
    canUndo: computed(() => history.value.past.length > 0),
    canRedo: computed(() => history.value.future.length > 0),
    open(document: Json): void {
      history.value = openDraft(document);
      saved.value = document;
    },
    read,
    list,
    write,
    add(pointer: string, item: Json): number {
      const items = list(pointer);
      write(pointer, [...items, item]);
      return items.length;
    },
    removeAt(pointer: string, index: number): void {
      write(
        pointer,
        list(pointer).filter((_item, i) => i !== index),
      );
    },
    move(pointer: string, from: number, to: number): void {
      const items = [...list(pointer)];
      if (to < 0 || to >= items.length) return;
      const [item] = items.splice(from, 1);
      items.splice(to, 0, item);
      write(pointer, items);
    },
    replace(document: Json, about: string): void {
      history.value = recordChange(history.value, document, about);
    },
    undo(): void {
      history.value = undoStep(history.value);
    },
    redo(): void {
      history.value = redoStep(history.value);
    },
    markSaved(document: Json): void {
      saved.value = document;
    },
    /** What is wrong with a member or anything in it, in one sentence. */
    issueAt(pointer: string, inside = false): string | undefined {
      const found = issues.value.find(({ field }) => field === pointer || (inside && field.startsWith(`${pointer}/`)));
      return found && `${found.message}. ${found.remedy}`;
    },
  };
}
export type ScenarioDraftState = ReturnType<typeof useScenarioDraft>;
