import type { ClassDeed, ClassEntry } from '#shared/scenario/class-log.ts';
import { EMPTY_CLASS, foldEntry, foldLog, type ClassState } from '#shared/scenario/class-state.ts';
import type { Database, Repositories } from '../../data/database.ts';
import type { LiveClassRecord } from '../../data/repositories/classes.repository.ts';
import { notFound } from '../problem-error.ts';
import { createTurns } from './turns.ts';

/** A class as this process knows it: a copy of what the database holds, maybe a moment old. */
export interface KnownClass {
  record: LiveClassRecord;
  entries: readonly ClassEntry[];
  state: ClassState;
}

export interface Appending {
  /** The class as it stands, with its row locked. */
  known: KnownClass;
  /** On the same transaction. */
  on: Repositories;
  /** The server's time of the entries, ms. */
  atMs: number;
}

export type AppendListener = (known: KnownClass, entries: readonly ClassEntry[]) => void;

/** Classes that nobody has asked for in this time are forgotten here; the database keeps them. */
const FORGET_AFTER_MS = 10 * 60 * 1000;

/**
 * The logs of classes: copies in this process, entries appended in transactions. What `append` resolves with is stored.
 * Entries that other processes stored come in by `refresh`.
 */
export function createClassLogStore({ database, now }: { database: Database; now: () => Date }) {
  const copies = new Map<string, KnownClass & { usedMs: number }>();
  const inTurn = createTurns();
  const listeners = new Set<AppendListener>();

  /** Takes new entries into the copy and tells everybody here. */
  function take(record: LiveClassRecord, entries: readonly ClassEntry[]): KnownClass {
    const copy = copies.get(record.id);
    const fresh = entries.filter(({ seq }) => seq > (copy?.state.seq ?? 0));
    const next = {
      record,
      entries: [...(copy?.entries ?? []), ...fresh],
      state: foldLog(fresh, copy?.state ?? EMPTY_CLASS),
      usedMs: now().getTime(),
    };
    copies.set(record.id, next);
    if (copy && fresh.length > 0) for (const listener of listeners) listener(next, fresh);
    return next;
  }

  async function load(on: Repositories, record: LiveClassRecord): Promise<KnownClass> {
    const copy = copies.get(record.id);
    if (copy && copy.state.seq === record.lastSeq) {
      copy.usedMs = now().getTime();
      copy.record = record;
      return copy;
    }
    return take(record, await on.classes.entries(record.id, copy?.state.seq ?? 0));
  }

  const store = {
    /** The copy, when there is one: may be a moment behind. */
    peek: (classId: string): KnownClass | null => copies.get(classId) ?? null,

    /** The class as the database has it now. */
    async read(classId: string): Promise<KnownClass> {
      const record = await database.classes.find(classId);
      if (record === null) throw notFound('class');
      return load(database, record);
    },

    /** The class from the copy, read only when there is none. */
    async known(classId: string): Promise<KnownClass> {
      const copy = copies.get(classId);
      if (!copy) return store.read(classId);
      copy.usedMs = now().getTime();
      return copy;
    },

    /** Reads what other processes have appended to some classes. */
    async refresh(classIds: readonly string[]): Promise<void> {
      const seqs = await database.classes.lastSeqs(classIds);
      for (const [id, seq] of seqs) {
        if ((copies.get(id)?.state.seq ?? 0) !== seq) await store.read(id);
      }
    },

    /**
     * Appends what `decide` makes of the class as it stands. A key that was used before gives the entries of then.
     *
     * @param by  Member who does it; null for the server.
     */
    append(
      classId: string,
      by: string | null,
      key: string | null,
      decide: (appending: Appending) => Promise<ClassDeed[]> | ClassDeed[],
    ): Promise<ClassEntry[]> {
      const work = async (): Promise<ClassEntry[]> => {
        const done = await database.transaction(async (on) => {
          const record = await on.classes.lock(classId);
          if (record === null) throw notFound('class');
          const known = await load(on, record);
          if (key !== null) {
            const before = await on.classes.seqOfKey(classId, key);
            if (before !== null)
              return { record, entries: known.entries.filter(({ seq }) => seq === before), old: true };
          }
          const atMs = now().getTime();
          const deeds = await decide({ known, on, atMs });
          const entries = deeds.map((deed, i): ClassEntry => ({ ...deed, seq: record.lastSeq + 1 + i, atMs, by }));
          if (entries.length === 0) return { record, entries, old: true };
          await on.classes.insertEntries(classId, entries, key);
          const lastSeq = record.lastSeq + entries.length;
          await on.classes.setLastSeq(classId, lastSeq);
          const ended = entries.some(({ kind }) => kind === 'ended');
          if (ended) await on.classes.markEnded(classId, new Date(atMs));
          const after = ended ? { endedAt: new Date(atMs), joinCode: null } : {};
          return { record: { ...record, ...after, lastSeq }, entries, old: false };
        });
        if (!done.old) take(done.record, done.entries);
        return done.entries;
      };
      // In this process entries of a class take turns anyway; waiting here keeps connections free.
      return inTurn(classId, work);
    },

    /** @returns a function that ends the listening */
    onAppended(listener: AppendListener): () => void {
      listeners.add(listener);
      return () => void listeners.delete(listener);
    },

    /** Forgets copies that nobody uses. */
    tidy(keep: ReadonlySet<string>): void {
      const since = now().getTime() - FORGET_AFTER_MS;
      for (const [id, { usedMs }] of copies) if (usedMs < since && !keep.has(id)) copies.delete(id);
    },
  };
  return store;
}
export type ClassLogStore = ReturnType<typeof createClassLogStore>;

/** The state after deeds that are about to be appended. */
export function stateAfter(state: ClassState, deeds: readonly ClassDeed[], atMs: number): ClassState {
  return deeds.reduce((before, deed) => foldEntry(before, { ...deed, seq: before.seq + 1, atMs, by: null }), state);
}
