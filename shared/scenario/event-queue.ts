/** The events of a run: which wait, which have fired, and which fire at a tick. */
import { compileCondition } from './expression/expression.ts';
import type { CompiledCondition } from './expression/expression.ts';
import { EXPRESSION_NAMES } from './expression/names.ts';
import type { SignalName } from './expression/names.ts';
import { ticksOf } from './measures/measure.ts';
import { ScenarioError } from './scenario-errors.ts';
import type { ScenarioEvent } from './scenario-format.ts';
import type { Signals } from './signals.ts';

export interface EventRecord {
  readonly event: ScenarioEvent;
  readonly injected: boolean;
  /** Tick at which it fired; −1 before. */
  firedTick: number;
  /** Tick from which it fires by itself (time), or that passes after `after` (delay). */
  readonly ticks: number;
  readonly after: EventRecord | null;
  readonly condition: CompiledCondition | null;
  /** The condition's test, for the case that every event it reads has fired. */
  readonly holds: CompiledCondition['holdsOnceFired'] | null;
  /** Events whose time the condition reads. */
  readonly reads: EventRecord[];
}

const NONE: readonly EventRecord[] = [];

export class EventQueue {
  /** In the order of the scenario, injected ones behind. */
  readonly records: EventRecord[] = [];
  private readonly byId = new Map<string, EventRecord>();
  private pending: EventRecord[] = [];

  constructor(events: readonly ScenarioEvent[]) {
    // An event may wait on a later one of the array: those come first here, the order of the scenario is kept in `records`.
    const made = new Map<string, EventRecord>();
    const waiting = new Map(events.map((event) => [event.id, event]));
    const make = (event: ScenarioEvent, depth: number): EventRecord => {
      const known = made.get(event.id);
      if (known) return known;
      if (depth > events.length) throw new ScenarioError('bad-event', `the event "${event.id}" waits on itself`);
      const { at } = event;
      const before = 'after' in at ? waiting.get(at.after) : undefined;
      if ('after' in at && !before) throw new ScenarioError('bad-event', `there is no event "${at.after}"`);
      const record = recordOf(event, before ? make(before, depth + 1) : null, false);
      made.set(event.id, record);
      return record;
    };
    for (const event of events) make(event, 0);
    for (const event of events) this.add(this.withReads(make(event, 0), (id) => made.get(id)));
  }

  private add(record: EventRecord): void {
    this.records.push(record);
    this.byId.set(record.event.id, record);
    this.pending.push(record);
  }

  /** Adds an event at run time. */
  inject(event: ScenarioEvent): void {
    if (this.byId.has(event.id)) {
      throw new ScenarioError('bad-event', `there is already an event "${event.id}" in this run`);
    }
    const { at } = event;
    const before = 'after' in at ? this.byId.get(at.after) : undefined;
    if ('after' in at && !before) {
      throw new ScenarioError('bad-event', `the event "${event.id}" waits on "${at.after}", which is not in this run`);
    }
    this.add(this.withReads(recordOf(event, before ?? null, true), this.get));
  }

  /** Takes an event out again; one that has fired only when `fired` says so. What waits on it never fires. */
  withdraw(id: string, fired: boolean): void {
    const record = this.byId.get(id);
    if (!record || (record.firedTick >= 0 && !fired)) return;
    this.byId.delete(id);
    this.records.splice(this.records.indexOf(record), 1);
    this.pending = this.pending.filter((one) => one !== record);
  }

  /** Resolves the events that a condition reads. */
  private withReads(record: EventRecord, find: (id: string) => EventRecord | undefined): EventRecord {
    for (const id of record.condition?.sinceIds ?? []) {
      const read = find(id);
      if (!read)
        throw new ScenarioError(
          'bad-event',
          `the event "${record.event.id}" reads since(${id}), which is not in this run`,
        );
      record.reads.push(read);
    }
    return record;
  }

  readonly get = (id: string): EventRecord | undefined => this.byId.get(id);

  /** Tick at which an event fired; −1 before, or for an unknown id. */
  readonly firedTickOf = (id: string): number => this.byId.get(id)?.firedTick ?? -1;

  /** Events that fire at this tick, in array order; all triggers see the same state, a chain fires at the next tick. */
  fire(s: Signals): readonly EventRecord[] {
    const { pending } = this;
    const { tick } = s;
    let firing: EventRecord[] | null = null;
    for (let i = 0; i < pending.length; i++) {
      const record = pending[i];
      const { holds, after } = record;
      const fires =
        holds !== null
          ? allFired(record.reads) && holds(s)
          : after === null
            ? tick >= record.ticks
            : after.firedTick >= 0 && after.firedTick < tick && tick >= after.firedTick + record.ticks;
      if (fires) (firing ??= []).push(record);
    }
    if (firing === null) return NONE;
    for (const record of firing) record.firedTick = tick;
    this.pending = pending.filter((record) => record.firedTick < 0);
    return firing;
  }

  /** Events that have not fired. */
  get unfired(): readonly EventRecord[] {
    return this.pending;
  }

  save(): { records: EventRecord[]; ticks: number[] } {
    return { records: [...this.records], ticks: this.records.map(({ firedTick }) => firedTick) };
  }
  restore(kept: { records: readonly EventRecord[]; ticks: readonly number[] }): void {
    for (const record of this.records) this.byId.delete(record.event.id);
    this.records.length = 0;
    kept.records.forEach((record, i) => {
      record.firedTick = kept.ticks[i];
      this.records.push(record);
      this.byId.set(record.event.id, record);
    });
    this.pending = this.records.filter(({ firedTick }) => firedTick < 0);
  }
}

/** All members are written in one place, so that every record has the same shape for the engine that runs this. */
function recordOf(event: ScenarioEvent, after: EventRecord | null, injected: boolean): EventRecord {
  const { at } = event;
  const ticks = 'time_s' in at ? ticksOf(at.time_s) : 'after' in at ? ticksOf(at.delay_s) : 0;
  const condition = 'when' in at ? conditionOf(event.id, at.when) : null;
  return {
    event,
    injected,
    firedTick: -1,
    ticks,
    after,
    condition,
    holds: condition?.holdsOnceFired ?? null,
    reads: [],
  };
}

function conditionOf(id: string, when: string): CompiledCondition {
  const compiled = compileCondition(when);
  if (compiled.ok) return compiled.condition;
  const { position, message } = compiled.problem;
  throw new ScenarioError('bad-event', `the event "${id}": at character ${position + 1}: ${message}`);
}

function allFired(records: readonly EventRecord[]): boolean {
  for (let i = 0; i < records.length; i++) if (records[i].firedTick < 0) return false;
  return true;
}

/** Signals that the conditions of events read. */
export function conditionSignals(events: readonly ScenarioEvent[]): SignalName[] {
  return events.flatMap(({ at }) => {
    const compiled = 'when' in at ? compileCondition(at.when) : null;
    return compiled?.ok ? compiled.condition.names.map((name) => EXPRESSION_NAMES[name].signal) : [];
  });
}
