/** What the log of a class adds up to: roster, run in progress, clock, branches, events in force. Pure; see class-log.ts. */
import { clockTick, segmentAt, type ClockSegment } from './class-clock.ts';
import type { ClassEntry, ClassMode, ClassOptions, EntryOf, MemberRole, PlaylistItem } from './class-log.ts';
import type { DrawnValues, InjectedEvent } from './run-types.ts';

/** expected: a kept seat; asking: at the door; in: a member, connected or not; out: left or sent out. */
export type Standing = 'expected' | 'asking' | 'in' | 'left' | 'removed';

export interface ClassMember {
  id: string;
  name: string;
  role: MemberRole;
  /** 0 for instructors and at the door. */
  seat: number;
  standing: Standing;
}

export interface ClassBranch {
  /** Branch it goes off from, and where; the first goes off from nothing. */
  from: number;
  tick: number;
  /** All events in force on this branch, those of the branches before included; ascending by tick. */
  injected: readonly InjectedEvent[];
}

export interface ClassRun {
  run: number;
  mode: ClassMode;
  index: number;
  seed: number;
  drawn: DrawnValues;
  startMs: number;
  durationTicks: number;
  attempt: string | null;
  restartOf: number | null;
  segments: readonly ClockSegment[];
  branches: readonly ClassBranch[];
  /** The branch that is flown. */
  branch: number;
  /** The latest tick flown on this branch before the present segment. */
  headBefore: number;
  /** Who flies the demonstration from which tick. */
  controls: readonly { member: string; tick: number }[];
  /** Whose aeroplane everybody sees; null: each their own, or the demonstration. */
  shown: string | null;
  /** Tick at which the run is over; null while it is not. */
  overAt: number | null;
}

export interface ClassMessage {
  seq: number;
  atMs: number;
  text: string;
  to: string | null;
  by: string | null;
}

export interface ClassState {
  /** Number of the last entry folded in; 0 before the first. */
  seq: number;
  title: string;
  instructor: string | null;
  playlist: readonly PlaylistItem[];
  seats: number;
  guests: boolean;
  options: ClassOptions;
  /** Mode and scenario of the next run. */
  mode: ClassMode;
  index: number;
  members: readonly ClassMember[];
  /** The latest run, also when it is over; null before the first. */
  run: ClassRun | null;
  messages: readonly ClassMessage[];
  differences: number;
  ended: boolean;
}

export type RunPhase = 'countdown' | 'running' | 'frozen' | 'over';

const KEPT_MESSAGES = 50;

export const EMPTY_CLASS: ClassState = {
  seq: 0,
  title: '',
  instructor: null,
  playlist: [],
  seats: 0,
  guests: false,
  options: { locked: false, lateJoiners: true, guestsAsk: true, namesHidden: false },
  mode: 'demonstration',
  index: 0,
  members: [],
  run: null,
  messages: [],
  differences: 0,
  ended: false,
};

/** The state after one more entry; the state before is left as it was. */
export function foldEntry(state: ClassState, entry: ClassEntry): ClassState {
  return { ...state, ...changes(state, entry), seq: entry.seq };
}

export function foldLog(entries: readonly ClassEntry[], from: ClassState = EMPTY_CLASS): ClassState {
  return entries.reduce(foldEntry, from);
}

/** The latest state of every run in a log, in the order in which they were started. */
export function runsOf(entries: readonly ClassEntry[]): ClassRun[] {
  const runs: ClassRun[] = [];
  let state = EMPTY_CLASS;
  for (const entry of entries) {
    state = foldEntry(state, entry);
    if (state.run !== null) runs[state.run.run - 1] = state.run;
  }
  return runs;
}

function changes(state: ClassState, entry: ClassEntry): Partial<ClassState> {
  switch (entry.kind) {
    case 'opened':
      return opened(entry);
    case 'asked':
      return withMember(state, { id: entry.member, name: entry.name, role: 'guest', seat: 0, standing: 'asking' });
    case 'joined': {
      const { member: id, name, role, seat } = entry;
      return withMember(state, { id, name, role, seat, standing: 'in' });
    }
    case 'left':
    case 'removed':
      return {
        members: state.members.map((one) => (one.id === entry.member ? { ...one, standing: entry.kind } : one)),
      };
    case 'options':
      return { options: entry.options };
    case 'mode':
      return { mode: entry.mode };
    case 'scenario':
      return { index: entry.index };
    case 'started':
      return { run: startedRun(state, entry), mode: entry.mode, index: entry.index };
    case 'message': {
      const { seq, atMs, text, to, by } = entry;
      return { messages: [...state.messages, { seq, atMs, text, to, by }].slice(-KEPT_MESSAGES) };
    }
    case 'differed':
      return { differences: state.differences + 1 };
    case 'ended':
      return {
        ended: true,
        run: state.run && { ...state.run, overAt: state.run.overAt ?? flownAt(state.run, entry.atMs) },
      };
    default:
      return state.run === null ? {} : { run: { ...state.run, ...runChanges(state.run, entry) } };
  }
}

function opened(entry: EntryOf<'opened'>): Partial<ClassState> {
  const { title, playlist, seats, mode, guests, options, instructor, expected } = entry;
  const members: ClassMember[] = [
    { id: instructor.member, name: instructor.name, role: 'instructor', seat: 0, standing: 'in' },
    ...expected.map(({ member: id, name, seat }): ClassMember => ({
      id,
      name,
      role: 'trainee',
      seat,
      standing: 'expected',
    })),
  ];
  return { title, playlist, seats, mode, guests, options, instructor: instructor.member, members };
}

function withMember(state: ClassState, member: ClassMember): Partial<ClassState> {
  const known = state.members.some(({ id }) => id === member.id);
  const members = known
    ? state.members.map((one) => (one.id === member.id ? member : one))
    : [...state.members, member];
  return { members: members.toSorted((a, b) => a.seat - b.seat) };
}

function startedRun(state: ClassState, entry: EntryOf<'started'>): ClassRun {
  const { run, mode, index, seed, drawn, startMs, attempt, controls, restartOf } = entry;
  return {
    run,
    mode,
    index,
    seed,
    drawn,
    startMs,
    attempt,
    restartOf,
    durationTicks: state.playlist[index]?.durationTicks ?? 0,
    segments: [{ fromMs: startMs, tick: 0, rate: 1 }],
    branches: [{ from: 0, tick: 0, injected: [] }],
    branch: 0,
    headBefore: 0,
    controls: controls === null ? [] : [{ member: controls, tick: 0 }],
    shown: null,
    overAt: null,
  };
}

/** The latest tick flown on the present branch when a new segment begins at a time. */
function flownAt(run: ClassRun, ms: number): number {
  return Math.max(run.headBefore, clockTick(run.segments, ms, run.durationTicks));
}

function runChanges(run: ClassRun, entry: ClassEntry): Partial<ClassRun> {
  switch (entry.kind) {
    case 'clock': {
      const { fromMs, tick, rate } = entry;
      return { segments: [...run.segments, { fromMs, tick, rate }], headBefore: flownAt(run, fromMs) };
    }
    case 'branched': {
      const { from, tick, branch } = entry;
      const before = (run.branches[from]?.injected ?? []).filter((one) => one.tick < tick);
      // What was taken back only after the branch begins is in force again.
      const injected = before.map((one) => (one.until !== null && one.until > tick ? { ...one, until: null } : one));
      return {
        branches: [...run.branches, { from, tick, injected }],
        branch,
        headBefore: tick,
        controls: run.controls.filter((one, i) => i === 0 || one.tick <= tick),
      };
    }
    case 'injected': {
      const injected = [...run.branches[run.branch].injected, { tick: entry.tick, event: entry.event, until: null }];
      return { branches: withInjected(run, injected) };
    }
    case 'disarmed':
      return {
        branches: withInjected(
          run,
          run.branches[run.branch].injected.map((one) =>
            one.event.id === entry.id && one.until === null ? { ...one, until: entry.tick } : one,
          ),
        ),
      };
    case 'shown':
      return { shown: entry.member };
    case 'controls':
      return {
        controls: [...run.controls.filter(({ tick }) => tick < entry.tick), { member: entry.member, tick: entry.tick }],
      };
    case 'over':
      return entry.run === run.run ? { overAt: entry.tick } : {};
    default:
      return {};
  }
}

function withInjected(run: ClassRun, injected: InjectedEvent[]): ClassBranch[] {
  injected.sort((a, b) => a.tick - b.tick);
  return run.branches.map((branch, i) => (i === run.branch ? { ...branch, injected } : branch));
}

/** The tick that the class clock shows. */
export function tickAt(run: ClassRun, serverMs: number): number {
  return run.overAt ?? clockTick(run.segments, serverMs, run.durationTicks);
}

export function phaseAt(run: ClassRun, serverMs: number): RunPhase {
  if (run.overAt !== null) return 'over';
  const segment = segmentAt(run.segments, serverMs);
  if (segment.rate === 0) return 'frozen';
  if (segment.tick === 0 && serverMs < segment.fromMs) return 'countdown';
  return clockTick(run.segments, serverMs, run.durationTicks) >= run.durationTicks ? 'over' : 'running';
}

/** The rate of the clock at a time; 0 when it stands. */
export function rateAt(run: ClassRun, serverMs: number): number {
  return phaseAt(run, serverMs) === 'running' ? segmentAt(run.segments, serverMs).rate : 0;
}

/** The latest tick flown on the present branch: a rewound clock shows earlier ones. */
export function headTickAt(run: ClassRun, serverMs: number): number {
  return Math.max(run.headBefore, tickAt(run, serverMs));
}

/** True while an earlier moment is shown: going on from here makes a branch. */
export function standsInThePast(run: ClassRun, serverMs: number): boolean {
  return tickAt(run, serverMs) < headTickAt(run, serverMs);
}

/** Events that the class added and that are in force on a branch, ascending by tick. */
export function injectedOn(run: ClassRun, branch: number = run.branch): readonly InjectedEvent[] {
  return run.branches[branch]?.injected ?? [];
}

/** Who flies the demonstration at a tick; null outside a demonstration. */
export function controlsAt(run: ClassRun, tick: number): string | null {
  let holder: string | null = null;
  for (const { member, tick: from } of run.controls) if (from <= tick) holder = member;
  return holder;
}

/** Events in force on every branch, in a form to store and send. */
export function branchesOf(run: ClassRun): InjectedEvent[][] {
  return run.branches.map(({ injected }) => [...injected]);
}

export function memberOf(state: ClassState, id: string): ClassMember | null {
  return state.members.find((one) => one.id === id) ?? null;
}

/** The lowest seat that nobody has and none is kept for; null when the class is full. */
export function freeSeat(state: ClassState): number | null {
  const taken = new Set(
    state.members.filter(({ standing }) => standing === 'in' || standing === 'expected').map(({ seat }) => seat),
  );
  for (let seat = 1; seat <= state.seats; seat += 1) if (!taken.has(seat)) return seat;
  return null;
}
