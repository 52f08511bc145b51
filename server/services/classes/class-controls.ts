import { randomInt, randomUUID } from 'node:crypto';
import type { classControlSchema } from '#shared/contracts/class-socket.ts';
import type { z } from 'zod';
import { segmentAt } from '#shared/scenario/class-clock.ts';
import type { ClassDeed, ClassEntry } from '#shared/scenario/class-log.ts';
import {
  headTickAt,
  injectedOn,
  memberOf,
  phaseAt,
  standsInThePast,
  tickAt,
  type ClassRun,
  type ClassState,
} from '#shared/scenario/class-state.ts';
import {
  checkAgainstAirframe,
  eventSchema,
  parseScenario,
  type ScenarioEvent,
} from '#shared/scenario/scenario-schema.ts';
import { drawValues } from '#shared/scenario/variation.ts';
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import { storedAirframe, storedScenario } from '../attempts/attempt-data.ts';
import type { Appending, ClassLogStore } from './class-log-store.ts';
import type { ClassAttempts } from './class-attempts.ts';
import { ClassProblem } from './class-problem.ts';
import type { ClassScenarios } from './class-scenarios.ts';

type Control = z.output<typeof classControlSchema>;

/** Stops and events lie this far ahead, so that word of them reaches everybody before the tick. */
export const LEAD_MS = 250;
const SEED_LIMIT = 2 ** 32;
const MAX_INJECTED = 200;

export interface ControlsSetup {
  log: ClassLogStore;
  attempts: ClassAttempts;
  scenarios: ClassScenarios;
}

function runOf(state: ClassState): ClassRun {
  if (state.run === null) throw new ClassProblem('no-run', 'Nothing has been started yet.');
  if (state.run.overAt !== null) throw new ClassProblem('run-over', 'This run is over; start the next one.');
  return state.run;
}

function memberIn(state: ClassState, id: string): void {
  if (memberOf(state, id)?.standing !== 'in')
    throw new ClassProblem('not-a-member', 'Nobody of this class has this seat.');
}

/** The run in progress is over where it stands. */
function ending(state: ClassState, atMs: number): ClassDeed[] {
  const { run } = state;
  if (run === null || run.overAt !== null) return [];
  return [{ kind: 'over', run: run.run, tick: headTickAt(run, atMs) }];
}

/** A clock segment that begins a little ahead, at the tick where the present one will be then. */
function clock(run: ClassRun, atMs: number, rate: number, why: 'freeze' | 'rate'): ClassDeed {
  const fromMs = atMs + LEAD_MS;
  return { kind: 'clock', fromMs, tick: tickAt(run, fromMs), rate, why };
}

/** Goes on from where the clock stands: from an earlier moment as a new branch. */
function goingOn(run: ClassRun, atMs: number, rate: number): ClassDeed[] {
  const tick = tickAt(run, atMs);
  const branched: ClassDeed[] = standsInThePast(run, atMs) ? [branchAt(run, tick)] : [];
  return [...branched, { kind: 'clock', fromMs: atMs + LEAD_MS, tick, rate, why: 'resume' }];
}

const branchAt = (run: ClassRun, tick: number): ClassDeed => ({
  kind: 'branched',
  branch: run.branches.length,
  from: run.branch,
  tick,
});

/** The rate before the clock was stopped. */
function lastRate(run: ClassRun): number {
  return run.segments.findLast(({ rate }) => rate > 0)?.rate ?? 1;
}

/** What the instructor's controls append to the log. */
export function createClassControls({ log, attempts, scenarios }: ControlsSetup) {
  async function started(appending: Appending, by: string, again: boolean, countdownS: number): Promise<ClassDeed[]> {
    const { known, on, atMs } = appending;
    const { state } = known;
    const before = state.run;
    if (again && before === null) throw new ClassProblem('no-run', 'Nothing has been started yet.');
    const { mode, index } = again && before !== null ? before : state;
    const revision = await scenarios.revision(known.record.organisationId, state.playlist[index], on);
    const scenario = storedScenario(revision.document);
    const seed = again && before !== null ? before.seed : randomInt(SEED_LIMIT);
    const run = (before?.run ?? 0) + 1;
    const startMs = atMs + Math.max(LEAD_MS, Math.round(countdownS * 1000));
    const drawn = drawValues(scenario, seed);
    const deed: ClassDeed = {
      kind: 'started',
      run,
      mode,
      index,
      seed,
      drawn,
      startMs,
      attempt: null,
      controls: mode === 'demonstration' ? by : null,
      restartOf: again && before !== null ? before.run : null,
    };
    if (mode === 'demonstration') {
      deed.attempt = randomUUID();
      await attempts.insert(on, {
        id: deed.attempt,
        known,
        memberId: by,
        run,
        seed,
        drawn,
        revision,
        startMs,
        demonstration: true,
      });
    }
    return [...ending(state, atMs), deed];
  }

  /** The event as the run takes it, with an id of its own; everything about it is checked against scenario and airframe. */
  async function eventOf(
    { known, on }: Appending,
    run: ClassRun,
    given: Record<string, unknown>,
  ): Promise<ScenarioEvent> {
    const { state, record } = known;
    const injected = injectedOn(run);
    if (injected.length >= MAX_INJECTED) throw new ClassProblem('too-many', 'This run has all the events it can take.');
    const revision = await scenarios.revision(record.organisationId, state.playlist[run.index], on);
    const scenario = storedScenario(revision.document);
    const taken = new Set(
      [...scenario.events, ...run.branches.flatMap((b) => b.injected.map((i) => i.event))].map((e) => e.id),
    );
    let number = 1;
    while (taken.has(`live-${number}`)) number += 1;
    const parsed = eventSchema.safeParse({ ...given, id: `live-${number}` });
    if (!parsed.success) {
      const { path, message } = parsed.error.issues[0];
      throw new ClassProblem('bad-event', `${path.join('.') || 'The event'}: ${message}`);
    }
    const event = parsed.data;
    // The document with the live events behind its own: rules between events and of conditions are the scenario's.
    const whole = {
      ...(revision.document as object),
      events: [...scenario.events, ...injected.map((i) => i.event), event],
    }; // stored documents are objects
    const checked = parseScenario(whole);
    const place = `/events/${scenario.events.length + injected.length}`;
    if (!checked.ok) {
      const issue = checked.issues.find(({ field }) => field.startsWith(place)) ?? checked.issues[0];
      throw new ClassProblem('bad-event', `${issue.message}. ${issue.remedy}`);
    }
    const fit = checkAgainstAirframe({ ...scenario, events: [event] }, storedAirframe(revision.airframe.document));
    const issue = fit.issues.find(({ field }) => field.startsWith('/events/'));
    if (issue) throw new ClassProblem('bad-event', `${issue.message}. ${issue.remedy}`);
    return event;
  }

  async function decide(control: Control, by: string, appending: Appending): Promise<ClassDeed[]> {
    const { known, atMs } = appending;
    const { state } = known;
    if (state.ended) throw new ClassProblem('class-ended', 'This class has ended.');
    switch (control.deed) {
      case 'options':
        return [{ kind: 'options', options: { ...state.options, ...control.options } }];
      case 'admit': {
        const member = memberOf(state, control.member);
        if (member?.standing !== 'asking')
          throw new ClassProblem('not-a-member', 'Nobody of this name waits at the door.');
        const taken = new Set(
          state.members.filter((m) => m.standing === 'in' || m.standing === 'expected').map((m) => m.seat),
        );
        let seat = 1;
        while (taken.has(seat)) seat += 1;
        if (seat > state.seats) throw new ClassProblem('class-full', 'Every seat of this class is taken.');
        return [{ kind: 'joined', member: member.id, name: member.name, role: 'guest', seat }];
      }
      case 'remove': {
        const member = memberOf(state, control.member);
        if (member === null || member.standing === 'removed') return [];
        if (member.role === 'instructor') throw new ClassProblem('not-a-member', 'An instructor cannot be sent out.');
        const { run } = state;
        const back: ClassDeed[] = [];
        if (run !== null && run.overAt === null) {
          if (run.shown === member.id) back.push({ kind: 'shown', member: null });
          if (run.controls.at(-1)?.member === member.id)
            back.push({ kind: 'controls', member: by, tick: headTickAt(run, atMs + LEAD_MS) });
        }
        return [...back, { kind: 'removed', member: member.id }];
      }
      case 'mode':
        return state.mode === control.mode ? [] : [{ kind: 'mode', mode: control.mode }];
      case 'scenario': {
        const index = control.index ?? state.index + 1;
        if (index >= state.playlist.length) throw new ClassProblem('no-run', 'The playlist has no further scenario.');
        return [...ending(state, atMs), { kind: 'scenario', index }];
      }
      case 'start':
        return started(appending, by, false, control.countdownS);
      case 'restart':
        return started(appending, by, true, control.countdownS);
      case 'countdown': {
        const run = runOf(state);
        const segment = segmentAt(run.segments, atMs);
        if (headTickAt(run, atMs) > 0 || segment.tick > 0)
          throw new ClassProblem('run-in-progress', 'The run has begun; freeze it instead.');
        const fromMs = atMs + Math.max(LEAD_MS, Math.round(control.countdownS * 1000));
        return [{ kind: 'clock', fromMs, tick: 0, rate: 1, why: 'countdown' }];
      }
      case 'freeze': {
        const run = runOf(state);
        return segmentAt(run.segments, atMs).rate === 0 ? [] : [clock(run, atMs, 0, 'freeze')];
      }
      case 'resume': {
        const run = runOf(state);
        return segmentAt(run.segments, atMs).rate === 0 ? goingOn(run, atMs, lastRate(run)) : [];
      }
      case 'rate': {
        const run = runOf(state);
        const { rate } = segmentAt(run.segments, atMs);
        if (rate === 0) return goingOn(run, atMs, control.rate);
        return rate === control.rate ? [] : [clock(run, atMs, control.rate, 'rate')];
      }
      case 'rewind': {
        const run = runOf(state);
        const tick = Math.min(control.tick, headTickAt(run, atMs));
        return [{ kind: 'clock', fromMs: atMs, tick, rate: 0, why: 'rewind' }];
      }
      case 'branch': {
        const run = runOf(state);
        const tick = Math.min(control.tick, headTickAt(run, atMs));
        return [{ kind: 'clock', fromMs: atMs, tick, rate: 0, why: 'rewind' }, branchAt(run, tick)];
      }
      case 'inject': {
        const run = runOf(state);
        const event = await eventOf(appending, run, control.event);
        const past = standsInThePast(run, atMs);
        const tick = past ? tickAt(run, atMs) : tickAt(run, atMs + LEAD_MS);
        return [...(past ? [branchAt(run, tick)] : []), { kind: 'injected', tick, event }];
      }
      case 'disarm': {
        const run = runOf(state);
        const found = injectedOn(run).some(({ event, until }) => event.id === control.id && until === null);
        if (!found) throw new ClassProblem('bad-event', 'No such event is armed.');
        const past = standsInThePast(run, atMs);
        const tick = past ? tickAt(run, atMs) : tickAt(run, atMs + LEAD_MS);
        return [...(past ? [branchAt(run, tick)] : []), { kind: 'disarmed', id: control.id, tick }];
      }
      case 'show': {
        const run = runOf(state);
        if (control.member !== null) memberIn(state, control.member);
        if (control.member !== null && run.mode === 'demonstration')
          throw new ClassProblem('not-shown', 'In a demonstration everybody sees its aeroplane already.');
        return run.shown === control.member ? [] : [{ kind: 'shown', member: control.member }];
      }
      case 'controls': {
        const run = runOf(state);
        memberIn(state, control.member);
        if (run.mode !== 'demonstration')
          throw new ClassProblem('not-your-controls', 'Everybody flies their own aeroplane.');
        if (run.controls.at(-1)?.member === control.member) return [];
        const past = standsInThePast(run, atMs);
        const tick = past ? tickAt(run, atMs) : headTickAt(run, atMs + LEAD_MS);
        return [...(past ? [branchAt(run, tick)] : []), { kind: 'controls', member: control.member, tick }];
      }
      case 'message':
        if (control.to !== null) memberIn(state, control.to);
        return [{ kind: 'message', text: control.text, to: control.to }];
      case 'stop':
        runOf(state);
        return ending(state, atMs);
      case 'end':
        return [...ending(state, atMs), { kind: 'ended' }];
    }
  }

  async function audit({ known, on, atMs }: Appending, by: string, control: Control): Promise<void> {
    const member = await on.classes.findMember(known.record.id, by);
    await on.audit.append({
      organisationId: known.record.organisationId,
      at: new Date(atMs),
      actorId: member?.personId ?? null,
      deed: control.deed === 'end' ? 'class.ended' : 'class.member-removed',
      subjectKind: 'class',
      subjectId: known.record.id,
      detail: control.deed === 'remove' ? { member: control.member } : {},
      address: null,
    });
  }

  return {
    /** Ends a class that everybody has forgotten: its code must not stay good for ever. */
    async endForgotten(classId: string, quietSinceMs: number): Promise<void> {
      await log.append(classId, null, null, ({ known: { state, entries }, atMs }) => {
        const last = entries.at(-1)?.atMs ?? 0;
        return state.ended || last > quietSinceMs ? [] : [...ending(state, atMs), { kind: 'ended' }];
      });
    },

    /** Appends what a control of the instructor does. */
    control(classId: string, by: string, control: Control): Promise<ClassEntry[]> {
      return log.append(classId, by, control.key, async (appending) => {
        const deeds = await decide(control, by, appending);
        if (control.deed === 'end' || control.deed === 'remove') await audit(appending, by, control);
        return deeds;
      });
    },

    /** The aeroplane with the controls met a freeze of the scenario. */
    stands(classId: string, by: string, runNumber: number, tick: number): Promise<ClassEntry[]> {
      return log.append(classId, by, null, ({ known: { state }, atMs }) => {
        const run = runOf(state);
        if (run.run !== runNumber || run.controls.at(-1)?.member !== by)
          throw new ClassProblem('not-your-controls', 'Another flies the demonstration.');
        if (phaseAt(run, atMs) === 'frozen') return [];
        const now = tickAt(run, atMs);
        if (tick > now + TICK_RATE_HZ / 2 || tick < now - 2 * TICK_RATE_HZ)
          throw new ClassProblem('not-your-controls', 'The class clock is elsewhere.');
        return [{ kind: 'clock', fromMs: atMs, tick, rate: 0, why: 'scenario' }];
      });
    },

    /** A viewer's state differed and was integrated again. */
    differed(classId: string, by: string, what: { attempt: string; tick: number; expected: string; found: string }) {
      return log.append(classId, by, null, ({ known: { state } }) =>
        state.ended || state.run === null ? [] : [{ kind: 'differed', member: by, ...what }],
      );
    },
  };
}
export type ClassControls = ReturnType<typeof createClassControls>;
