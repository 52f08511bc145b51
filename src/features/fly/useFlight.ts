import { computed, onScopeDispose, ref, shallowRef, watch } from 'vue';
import type { AttemptResult, StartedAttempt } from '#shared/contracts/attempts.ts';
import type { ScenarioRevision } from '#shared/contracts/scenarios.ts';
import type { CriterionResult, EndReason } from '#shared/scenario/run-types.ts';
import { type FlightPhase, type FreezeReason } from '../../runner/flight-session.ts';
import type { ButtonControl } from '../../runner/input/device-profile.ts';
import { devicesOf } from '../../runner/input/device-reading.ts';
import { causeOf } from '../../services/api-error.ts';
import { startAttempt } from '../../services/attempts-api.ts';
import { newKey } from '../../services/new-key.ts';
import { getScenario } from '../../services/scenarios-api.ts';
import { useCockpitStore } from '../../stores/cockpit.store.ts';
import { useControlsStore } from '../../stores/controls.store.ts';
import { useDeliveryStore } from '../../stores/delivery.store.ts';
import { useSessionStore } from '../../stores/session.store.ts';
import { zeroS } from './flight-log.ts';
import { type Flight, type FlightHands, startFlight } from './start-flight.ts';

export interface LocalResult {
  ended: EndReason;
  detail: string | null;
  durationS: number;
  criteria: CriterionResult[];
  passed: boolean;
}

export interface FlightHooks {
  /** A new flight is ready to be flown. */
  ready: (flight: Flight) => void;
  tick: (flight: Flight) => void;
  phase: (phase: FlightPhase, reason: FreezeReason | null) => void;
  held: (heldMs: number) => void;
  /** The flight goes on from an earlier tick: what came after it is set aside. */
  branched: (flight: Flight, fromTick: number) => void;
  /** A button of a device was pressed. */
  pressed: (control: ButtonControl) => void;
  /** A device went away while the controls of the flight hang on it. */
  deviceGone: (name: string) => void;
}

/** The life of a flight on one scenario: load, brief, start, fly, end, and the server's result. */
export function useFlight(
  slug: () => string,
  revision: () => number | undefined,
  hooks: FlightHooks,
  /** The assignment that a start counts for. */
  assignment: () => string | undefined = () => undefined,
) {
  const session = useSessionStore();
  const cockpit = useCockpitStore();
  const controls = useControlsStore();
  const deliveries = useDeliveryStore();

  const brief = shallowRef<ScenarioRevision | null>(null);
  const loadError = ref<string | null>(null);
  const startError = ref<string | null>(null);
  const starting = ref(false);
  const flight = shallowRef<Flight | null>(null);
  const phase = ref<FlightPhase | 'briefing'>('briefing');
  const freezeReason = ref<FreezeReason | null>(null);
  const rate = ref(1);
  /** Tick shown and last tick flown while the clock stands; the zero of its times stays that of the head. */
  const standing = ref({ tick: 0, headTick: 0, zeroS: 0 });
  const local = shallowRef<LocalResult | null>(null);
  let loading: AbortController | null = null;
  /** One key a press of Start, so that a repeated request does not count a second try. */
  let startKey: string | null = null;

  async function load(): Promise<void> {
    loading?.abort();
    const mine = new AbortController();
    loading = mine;
    loadError.value = null;
    brief.value = null;
    try {
      const found = await getScenario(slug(), revision(), mine.signal);
      if (loading === mine) brief.value = found;
    } catch (error) {
      if (!mine.signal.aborted) loadError.value = causeOf(error);
    }
  }

  function take(started: StartedAttempt, keeper: Awaited<ReturnType<typeof deliveries.begin>>): void {
    local.value = null;
    rate.value = 1;
    const hands: FlightHands = {
      rates: () => cockpit.keyRates,
      devices: () => devicesOf(navigator),
      profile: () => controls.profile,
      pressed: hooks.pressed,
    };
    const next = startFlight(started, keeper, hands, {
      tick: () => hooks.tick(next),
      phase: (now, reason) => {
        phase.value = now;
        freezeReason.value = reason;
        lookWhereItStands();
        hooks.phase(now, reason);
      },
      held: hooks.held,
      branched: (_tick, fromTick) => hooks.branched(next, fromTick),
      ended: (ended, detail) => {
        local.value = {
          ended,
          detail,
          durationS: next.run.timeS,
          criteria: next.run.results(),
          passed: next.run.passed(),
        };
      },
    });
    next.device.onGone((name) => {
      if (controls.profile.whenGone === 'freeze') next.session.freeze('device');
      hooks.deviceGone(name);
    });
    flight.value = next;
    phase.value = 'ready';
    hooks.ready(next);
  }

  /** Asks the server for an attempt and starts the clock. */
  async function start(): Promise<void> {
    const me = session.me;
    const known = brief.value;
    if (starting.value || !me || !known) return;
    starting.value = true;
    startError.value = null;
    startKey ??= newKey();
    try {
      const started = await startAttempt({
        scenarioSlug: known.slug,
        revision: known.revision,
        startKey,
        assignmentId: assignment(),
      });
      startKey = null;
      take(started, await deliveries.begin(started, me.person.id));
      flight.value?.session.start(performance.now());
    } catch (error) {
      startError.value = causeOf(error);
      // The cause of a fault of our own belongs in the console as well.
      console.warn('The flight could not start.', error);
    } finally {
      starting.value = false;
    }
  }

  /** Ends the present attempt as left, if it runs, and begins a new one. */
  async function restart(): Promise<void> {
    flight.value?.session.leave();
    await start();
  }

  const status = computed(() => {
    const id = flight.value?.started.id;
    return id === undefined ? null : (deliveries.statuses.get(id) ?? null);
  });
  const serverResult = computed<AttemptResult | null>(() => status.value?.result ?? null);

  function lookWhereItStands(): void {
    const session = flight.value?.session;
    if (!session) return;
    const { run, headTick } = session;
    const zero = run.tick === headTick ? zeroS(run.fired) : standing.value.zeroS;
    standing.value = { tick: run.tick, headTick, zeroS: zero };
  }
  function standAt(tick: number): void {
    flight.value?.session.standAt(tick);
    lookWhereItStands();
  }
  function step(): void {
    flight.value?.session.step();
    lookWhereItStands();
  }

  function setRate(next: number): void {
    flight.value?.session.setRate(next);
    rate.value = next;
  }

  watch(
    () => cockpit.keyRates,
    (rates) => {
      if (flight.value) flight.value.keyboard.rates = rates;
    },
  );
  watch([slug, revision], () => {
    flight.value?.session.leave();
    flight.value = null;
    phase.value = 'briefing';
    void load();
  });
  void load();
  onScopeDispose(() => {
    loading?.abort();
    // Leaving the page ends the flight; what was flown stays recorded and is delivered.
    flight.value?.session.leave();
  });

  return {
    brief,
    loadError,
    load,
    start,
    starting,
    startError,
    restart,
    flight,
    phase,
    freezeReason,
    rate,
    setRate,
    standing,
    standAt,
    step,
    local,
    status,
    serverResult,
  };
}
