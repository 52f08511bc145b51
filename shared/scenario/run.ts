/**
 * One run: a pure function of scenario, airframe, seed, inputs and injected events, 120 ticks a second.
 *
 * Tick n: read the inputs, evaluate the triggers in array order on state n, apply what fires, let the measures look,
 * integrate to n + 1. Inputs and noise are held over the tick.
 */
import { createObservation, createPlant } from '../model/plant.ts';
import { TICK_S } from '../model/plant-types.ts';
import type { Observation, PlantSnapshot } from '../model/plant-types.ts';
import { createStateHash, STATE_HASH_LENGTH } from '../numerics/state-hash.ts';
import { CriteriaBoard } from './criteria-board.ts';
import { eventText } from './describe.ts';
import { EngineBook } from './engine-book.ts';
import { applyEvent } from './event-effects.ts';
import type { EffectTargets } from './event-effects.ts';
import { conditionSignals, EventQueue } from './event-queue.ts';
import type { EventRecord } from './event-queue.ts';
import { signalsNeeded } from './measures/create-measure.ts';
import { ticksOf } from './measures/measure.ts';
import { compassRad, FULL, plantSetup } from './plant-setup.ts';
import { InjectionSchedule } from './injection-schedule.ts';
import type { ControlSample, CreateRun, EndReason, FiredEvent, Run, RunSnapshot } from './run-types.ts';
import { ScenarioError } from './scenario-errors.ts';
import { checkAgainstAirframe } from './scenario-schema.ts';
import { scriptedAt } from './scripted-inputs.ts';
import type { ScriptedInput } from './scripted-inputs.ts';
import { Signals } from './signals.ts';
import { ValidityWatch } from './validity-watch.ts';
import { drawValues, withDrawnValues } from './variation.ts';

/** Everything the next tick and the results depend on. */
interface Kept {
  plant: PlantSnapshot;
  events: ReturnType<EventQueue['save']>;
  engines: ReturnType<EngineBook['save']>;
  numbers: Float64Array;
  fired: FiredEvent[];
  scripted: ScriptedInput[];
  messages: { text: string; untilS: number }[];
  display: Record<string, 'normal' | 'failed' | 'frozen'>;
  ended: EndReason | null;
  endDetail: string | null;
  freezeRequested: boolean;
}

class Snapshot implements RunSnapshot {
  constructor(
    readonly tick: number,
    readonly stateHash: string,
    readonly kept: Kept,
  ) {}
}

/** An observation whose members are worked out when they are read. */
function readWhenAsked(engineCount: number, fresh: () => Observation): Observation {
  const out = createObservation(engineCount);
  for (const key of Object.keys(out)) {
    // A key of an observation, so it is one of its members.
    const member = key as keyof Observation;
    Object.defineProperty(out, member, { enumerable: true, get: () => fresh()[member] });
  }
  return out;
}

export const createRun: CreateRun = (spec, options = {}) => {
  const { scenario, airframe, seed } = spec;
  const lean = options.lean === true;
  const hashed = !lean && options.unhashed !== true;
  const fit = checkAgainstAirframe(scenario, airframe);
  if (fit.issues.length > 0) {
    throw new ScenarioError('does-not-fit-airframe', fit.issues[0].message, fit.issues);
  }
  const drawn = spec.drawn ?? drawValues(scenario, seed);
  const plant = createPlant(plantSetup(scenario, airframe, seed), { integrate: options.integrate });
  const engines = new EngineBook(plant.aircraft);
  const queue = new EventQueue(scenario.events.map((event) => withDrawnValues(event, drawn)));
  const line = {
    headingRad: compassRad(scenario.runway?.heading_deg ?? scenario.start.heading_deg),
    northM: 0,
    eastM: 0,
  };
  const signals = new Signals(plant, engines, line, queue.firedTickOf);
  const board = new CriteriaBoard(scenario.criteria, (id, criterion) => {
    const record = queue.get(id);
    if (record) return record;
    throw new ScenarioError('bad-event', `the criterion "${criterion}" names the unknown event "${id}"`);
  });
  signals.need(conditionSignals(scenario.events));
  for (const criterion of scenario.criteria) signals.need(signalsNeeded(criterion));
  signals.take();
  const hash = createStateHash();
  const watch = new ValidityWatch(signals);
  const durationTicks = Math.max(1, ticksOf(scenario.duration_s));
  const gearHeightM = scenario.runway?.gearHeight_m ?? 0;
  const endsBy: EndReason = scenario.runway ? 'touchdown' : 'ground';

  const fired: FiredEvent[] = [];
  const scripted: ScriptedInput[] = [];
  let messages: { text: string; untilS: number }[] = [];
  const display: Record<string, 'normal' | 'failed' | 'frozen'> = {};
  let ended: EndReason | null = null;
  let endDetail: string | null = null;
  let freezeRequested = false;
  let now: Observation | null = null;
  const targets: EffectTargets = {
    plant,
    engines,
    signals,
    scripted,
    get messages() {
      return messages;
    },
    display,
    requestFreeze() {
      freezeRequested = true;
    },
  };
  const schedule = new InjectionSchedule(queue, inject, spec.branches?.[0] ?? spec.injected ?? []);
  const numbersLength = STATE_HASH_LENGTH + ValidityWatch.MEMORY + board.memoryLength;
  if (hashed) plant.hashInto(hash);

  function readInputs(sample: ControlSample): void {
    const { inputs } = plant;
    let stick = sample.stick / FULL;
    let pedal = sample.pedal / FULL;
    for (const input of scripted) {
      const share = scriptedAt(input, plant.tick);
      if (input.axis === 'stick') stick += share;
      else pedal += share;
    }
    inputs.stick = stick > 1 ? 1 : stick < -1 ? -1 : stick;
    inputs.pedal = pedal > 1 ? 1 : pedal < -1 ? -1 : pedal;
    inputs.pitch = sample.pitch / FULL;
    inputs.rudderTrim = sample.rudderTrim / FULL;
    for (let i = 0; i < plant.engineCount; i++) {
      inputs.levers[i] = sample.levers[i] / FULL;
      inputs.feather[i] = sample.feather[i];
    }
  }

  function apply(firing: readonly EventRecord[], sample: ControlSample): void {
    // Some events read what the model holds for this tick: evaluate it, whoever else has looked.
    signals.full();
    for (const { event, injected } of firing) {
      applyEvent(event, targets);
      const { id, lane, kind } = event;
      fired.push({ id, lane, kind, tick: plant.tick, timeS: plant.tick * TICK_S, text: eventText(event), injected });
    }
    readInputs(sample);
    signals.take();
  }

  function inject(event: Parameters<Run['inject']>[0]): void {
    const { issues } = checkAgainstAirframe(
      { ...scenario, configuration: null, loading: null, events: [event] },
      airframe,
    );
    const own = issues.filter(({ field }) => field.startsWith('/events/'));
    if (own.length > 0) throw new ScenarioError('bad-event', own[0].message, own);
    queue.inject(withDrawnValues(event, drawValues({ events: [event] }, seed)));
    signals.need(conditionSignals([event]));
    signals.take();
  }

  function end(reason: EndReason, detail: string | null, look: boolean): void {
    ended = reason;
    endDetail = detail;
    signals.ended = reason;
    signals.take();
    if (look) board.finish(signals);
    else board.stop();
  }

  function step(sample: ControlSample): void {
    if (ended !== null) return;
    schedule.keepTo(plant.tick);
    freezeRequested = false;
    readInputs(sample);
    signals.take();
    if (messages.length > 0) messages = messages.filter(({ untilS }) => untilS > signals.timeS);
    const firing = queue.fire(signals);
    if (firing.length !== 0) apply(firing, sample);
    board.update(signals);
    if (!lean) watch.sample(signals);

    if (!plant.step()) {
      end('non-finite', plant.fault, false);
      return;
    }
    if (hashed) plant.hashInto(hash);
    signals.moved();
    if (signals.heightAboveRunwayM <= gearHeightM) {
      const where = scenario.runway ? null : `the aeroplane met the ground at ${signals.timeS.toFixed(2)} s`;
      end(endsBy, where, true);
    } else if (plant.tick >= durationTicks) end('completed', null, true);
  }

  return {
    spec,
    plant,
    drawn,
    get tick() {
      return plant.tick;
    },
    get timeS() {
      return plant.tick * TICK_S;
    },
    durationTicks,
    get ended() {
      return ended;
    },
    get endDetail() {
      return endDetail;
    },
    get now() {
      now ??= readWhenAsked(plant.engineCount, () => signals.full());
      return now;
    },
    fired,
    get warnings() {
      const lines = [...fit.warnings.map(({ message }) => `${message}.`), ...watch.lines()];
      if (ended === 'ground' && endDetail !== null) lines.push(`${endDetail}.`);
      if (ended !== null) for (const { event } of queue.unfired) lines.push(`the event "${event.id}" did not fire.`);
      return lines.map((text) => text[0].toUpperCase() + text.slice(1));
    },
    get messages() {
      return messages;
    },
    get freezeRequested() {
      return freezeRequested;
    },
    display,
    get deadSide() {
      return engines.deadSide;
    },
    neutralSample() {
      const { levers, feather } = plant.inputs;
      return {
        stick: 0,
        pedal: 0,
        pitch: 0,
        rudderTrim: 0,
        levers: Int16Array.from(levers, (lever) => Math.round(lever * FULL)),
        feather: feather.slice(),
      };
    },
    step,
    inject,
    reschedule: (list) => schedule.replace(list),
    wantedInto(out) {
      plant.wantedInto(out, scenario.technique);
    },
    leave() {
      if (ended === null) end('left', null, true);
    },
    criteria() {
      signals.take();
      return board.trackers.map((tracker) => tracker.running(signals));
    },
    results: () => board.trackers.map((tracker) => tracker.result()),
    passed() {
      if (ended === 'left' || ended === 'non-finite') return false;
      return board.trackers.every((tracker) => {
        const { required, verdict } = tracker.result();
        return !required || verdict === 'met' || verdict === 'near';
      });
    },
    stateHash() {
      if (!hashed) throw new ScenarioError('no-state-hash', 'this run keeps no state hash');
      return hash.hex();
    },
    save() {
      const numbers = new Float64Array(numbersLength);
      let at = hash.saveInto(numbers, 0);
      at = watch.saveInto(numbers, at);
      board.saveInto(numbers, at);
      return new Snapshot(plant.tick, hashed ? hash.hex() : '', {
        plant: plant.save(),
        events: queue.save(),
        engines: engines.save(),
        numbers,
        fired: [...fired],
        scripted: [...scripted],
        messages: [...messages],
        display: { ...display },
        ended,
        endDetail,
        freezeRequested,
      });
    },
    restore(snapshot) {
      if (!(snapshot instanceof Snapshot) || snapshot.kept.numbers.length !== numbersLength) {
        throw new ScenarioError('foreign-snapshot', 'this snapshot is of another run');
      }
      const { kept } = snapshot;
      plant.restore(kept.plant);
      queue.restore(kept.events);
      engines.reset(kept.engines);
      let at = hash.restoreFrom(kept.numbers, 0);
      at = watch.restoreFrom(kept.numbers, at);
      board.restoreFrom(kept.numbers, at);
      fired.splice(0, fired.length, ...kept.fired);
      scripted.splice(0, scripted.length, ...kept.scripted);
      messages = [...kept.messages];
      for (const name of Object.keys(display)) delete display[name];
      Object.assign(display, kept.display);
      ({ ended, endDetail, freezeRequested } = kept);
      schedule.moved();
      signals.ended = ended;
      signals.take();
    },
  };
};
