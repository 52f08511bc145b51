import { useIntervalFn } from '@vueuse/core';
import { computed, onScopeDispose, ref, shallowRef, triggerRef } from 'vue';
import type { BoardRow, MemberStatus, PresentedView, Telemetry } from '#shared/contracts/class-socket.ts';
import { EMPTY_CLASS, type ClassState, phaseAt, tickAt } from '#shared/scenario/class-state.ts';
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import type { Run } from '#shared/scenario/run-types.ts';
import { getClass, getClassScenario } from '../../services/classes-api.ts';
import { openClassSocket } from '../../services/class-socket.ts';
import { fetchMe } from '../../services/session-api.ts';
import { newKey } from '../../services/new-key.ts';
import { useNoticesStore } from '../../stores/notices.store.ts';
import { ClassSession, type Deed } from './class-session.ts';
import { createTelemetry } from './telemetry.ts';

/** Seconds of sideslip kept for the small traces of the board. */
const TRACE_S = 12;

export interface BoardLine {
  row: BoardRow;
  /** Server time of the last row, ms. */
  atMs: number;
  times: readonly number[];
  beta: readonly number[];
}

/** A little less than the tenth of a second at which telemetry is made. */
const TELL_EVERY_MS = 80;
const TELL_AGAIN_MS = 1000;

/** A class as this browser lives it. Which aeroplane is flown or looked on at follows from the log alone. */
export function useClass(classId: string) {
  let toldMs = 0;
  let lastRow: Telemetry | null = null;
  const notices = useNoticesStore();
  const state = shallowRef<ClassState>(EMPTY_CLASS);
  const connected = ref(false);
  const entered = ref(false);
  const over = ref<'removed' | 'ended' | 'replaced' | null>(null);
  const view = shallowRef<PresentedView | null>(null);
  const board = shallowRef(new Map<string, BoardLine>());
  const serverMs = ref(Date.now());
  const told = ref<string | null>(null);
  const telemetry = createTelemetry();
  const present = shallowRef<ReadonlySet<string>>(new Set());
  const statuses = shallowRef<ReadonlyMap<string, MemberStatus>>(new Map());
  const drawn = shallowRef<Run | null>(null);
  const flying = ref(false);
  let boardRun = 0;

  const session = new ClassSession({
    socket: openClassSocket(),
    classId,
    scenario: (index) => getClassScenario(classId, index),
    newKey,
    renew: async () => (await fetchMe()) !== null,
    events: {
      changed,
      board(run, rows) {
        if (run !== boardRun) {
          boardRun = run;
          board.value = new Map();
        }
        const nowMs = session.serverNow();
        for (const row of rows) {
          const before = board.value.get(row.member);
          const seconds = row.telemetry.tick / TICK_RATE_HZ;
          const rewound = before !== undefined && seconds < (before.times.at(-1) ?? 0);
          const kept = before === undefined || rewound ? { times: [], beta: [] } : before;
          const from = kept.times.findIndex((time) => seconds - time <= TRACE_S);
          const skip = from < 0 ? kept.times.length : from;
          const line: BoardLine = {
            row,
            atMs: nowMs,
            times: [...kept.times.slice(skip), seconds],
            beta: [...kept.beta.slice(skip), row.telemetry.betaDeg],
          };
          board.value.set(row.member, line);
        }
        triggerRef(board);
      },
      view: (next) => (view.value = next),
      closed: (reason) => (over.value = reason),
      said: (text) => (told.value = text),
      tick(run) {
        const row = telemetry.tick(run);
        const nowMs = performance.now();
        // After an absence many ticks are flown at once: the board wants the latest, ten times a second.
        if (!row) return;
        lastRow = row;
        if (nowMs - toldMs < TELL_EVERY_MS && row.ended === null) return;
        toldMs = nowMs;
        session.telemetry(row);
      },
    },
  });

  function changed(): void {
    state.value = session.state;
    connected.value = session.inside;
    entered.value = session.pass !== null;
    present.value = new Set(session.present);
    statuses.value = new Map(session.statuses);
    drawn.value = session.shown;
    flying.value = session.flight !== null && session.follower === null;
    if (session.state.ended) over.value ??= 'ended';
    void settle();
  }

  let settling = false;
  /** Takes the controls, looks on or lets go, as the log has it. */
  async function settle(): Promise<void> {
    const { run } = session.state;
    void session.send();
    if (settling || !run || !session.inside || session.state.ended) return;
    settling = true;
    try {
      if (run.overAt !== null) return;
      const me = session.member;
      if (run.mode === 'demonstration') {
        if (run.controls.at(-1)?.member === me) {
          await session.takeControls();
          session.stopFollowing();
          if (session.flight) session.flight.broadcast = true;
        } else {
          if (session.flight?.finished) session.dropControls();
          if (!session.flight && run.attempt !== null) await session.follow(run.attempt);
        }
        return;
      }
      const flies = session.pass?.role !== 'instructor';
      if (flies) {
        await session.takeControls();
        if (session.flight) session.flight.broadcast = run.shown === me;
      }
      if (run.shown === null || run.shown === me) session.stopFollowing();
      else {
        const attempt = session.heard ?? (flies ? null : await attemptOf(run.run, run.shown));
        if (attempt !== null) await session.follow(attempt);
      }
    } catch (error) {
      told.value = error instanceof Error ? error.message : 'The controls could not be taken.';
    } finally {
      settling = false;
      drawn.value = session.shown;
      flying.value = session.flight !== null && session.follower === null;
    }
  }
  /** An aeroplane that stands or has met its end is told again: telemetry may be lost, and a board may come late. */
  function tellAgain(): void {
    if (!lastRow || !session.flight || session.flight.line.run.tick < lastRow.tick) return;
    if (performance.now() - toldMs < TELL_AGAIN_MS) return;
    toldMs = performance.now();
    session.telemetry(lastRow);
  }
  async function attemptOf(run: number, member: string): Promise<string | null> {
    const { runsFlown } = await getClass(classId);
    const attempts = runsFlown.find((one) => one.run === run)?.attempts ?? [];
    return attempts.find((one) => one.member === member && !one.demonstration)?.id ?? null;
  }

  /** A deed of the instructor; what is refused is said. */
  async function act(deed: Deed): Promise<boolean> {
    try {
      await session.control(deed);
      return true;
    } catch (error) {
      notices.say(error instanceof Error ? error.message : 'The class did not take that.');
      return false;
    }
  }

  useIntervalFn(() => {
    serverMs.value = session.serverNow();
    tellAgain();
    void settle();
  }, 250);
  session.open();
  onScopeDispose(() => session.close());

  const run = computed(() => state.value.run);
  return {
    session,
    state,
    run,
    connected,
    entered,
    over,
    view,
    board,
    present,
    statuses,
    drawn,
    flying,
    told,
    serverMs,
    phase: computed(() => (run.value ? phaseAt(run.value, serverMs.value) : null)),
    tick: computed(() => (run.value ? tickAt(run.value, serverMs.value) : 0)),
    member: computed(() => (entered.value ? session.member : '')),
    isInstructor: computed(() => (entered.value ? session.pass?.role === 'instructor' : false)),
    admitted: computed(() => (entered.value && state.value ? (session.pass?.admitted ?? false) : false)),
    act,
    settle,
  };
}
export type LiveClass = ReturnType<typeof useClass>;
