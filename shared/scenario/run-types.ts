/**
 * The contract of one run: a pure function of scenario, airframe, seed, inputs and marks. Types only.
 * The fly screen, workers, server and command line all drive the same `Run`.
 */
import type { Airframe } from '../model/airframe-schema.ts';
import type { Observation, Plant, PlantOptions, WantedValues } from '../model/plant-types.ts';
import type { Scenario, ScenarioEvent } from './scenario-schema.ts';

/** Version of model and runner together; stored with every attempt. A change of any number raises it. */
export const MODEL_VERSION = '1.0.0';

export type EndReason = 'completed' | 'touchdown' | 'ground' | 'non-finite' | 'left';

/** One tick of pilot input as recorded: integers, so that the record is the input. */
export interface ControlSample {
  /** −32767 … 32767, right positive. */
  stick: number;
  pedal: number;
  pitch: number;
  rudderTrim: number;
  /** 0 … 32767 per engine. */
  levers: Int16Array;
  /** 0 | 1 per engine. */
  feather: Uint8Array;
}

/** Values drawn from the seed for events with `vary`: event id → member → value in the member's own unit. */
export type DrawnValues = Record<string, Record<string, number>>;

/** An event that a class added at run time. */
export interface InjectedEvent {
  /** Tick before whose input it was added. */
  tick: number;
  event: ScenarioEvent;
  /** Tick before whose input it was taken back unless it had fired; null when it was not. */
  until: number | null;
}

export interface RunSpec {
  scenario: Scenario;
  airframe: Airframe;
  seed: number;
  /** Given by the server for an attempt; drawn from the seed otherwise. */
  drawn?: DrawnValues;
  /** Events a class added at run time; ascending by tick. */
  injected?: readonly InjectedEvent[];
  /** The same for every branch of a class's run; the recording says where each begins. Branch 0 takes the place of `injected`. */
  branches?: readonly (readonly InjectedEvent[])[];
}

export interface RunOptions {
  /**
   * For thousands of runs at once: no state hash (`stateHash` refuses) and no watch for the limits of the data (`warnings`
   * without them). Results are the same.
   */
  lean?: boolean;
  /** For a run that is only looked at: no state hash, all else as ever. */
  unhashed?: boolean;
  /** Another integrator of the tick, such as an adaptive one that the stepper is compared with. */
  integrate?: PlantOptions['integrate'];
}

export interface FiredEvent {
  id: string;
  lane: ScenarioEvent['lane'];
  kind: ScenarioEvent['kind'];
  tick: number;
  timeS: number;
  /** One plain line for ticker and flags, e.g. "Left engine fails". */
  text: string;
  injected: boolean;
}

export type Verdict = 'met' | 'near' | 'not-met' | 'not-reached';

export interface CriterionResult {
  id: string;
  title: string;
  measure: string;
  required: boolean;
  /** In the limit's unit; null when never measured. */
  value: number | null;
  limit: { max?: number; min?: number; within?: [number, number]; unit: string };
  /** Distance to the limit in its unit, negative when beyond; null without a value. */
  margin: number | null;
  /** Run time of the extreme, s. */
  atS: number | null;
  verdict: Verdict;
  /** e.g. "not needed", "never". */
  note?: string;
}

export interface RunningCriterion extends CriterionResult {
  /** before its window, inside, or over. */
  phase: 'waiting' | 'running' | 'done';
  /** Present value of the measured quantity, not the extreme; null when not defined. */
  now: number | null;
}

export interface RunSnapshot {
  readonly tick: number;
  readonly stateHash: string;
}

export interface Run {
  readonly spec: RunSpec;
  readonly plant: Plant;
  readonly drawn: DrawnValues;
  readonly tick: number;
  readonly timeS: number;
  readonly durationTicks: number;
  readonly ended: EndReason | null;
  readonly endDetail: string | null;
  /**
   * Observation of the present tick. The same object each time; its members are worked out when they are read, so reading
   * them is right at any time and steps that nobody looks at cost nothing.
   */
  readonly now: Observation;
  readonly fired: readonly FiredEvent[];
  /** Remarks: times outside the data with causes, pedal reversals, what does not fit the airframe, events that never came. */
  readonly warnings: readonly string[];
  /** Messages being shown at this tick. */
  readonly messages: readonly { text: string; untilS: number }[];
  /** True when a freeze event asks the clock to stop at this tick. */
  readonly freezeRequested: boolean;
  /** Indications the `display` events took away: name → state. */
  readonly display: Readonly<Record<string, 'normal' | 'failed' | 'frozen'>>;
  /** +1 when the left side is dead, −1 right, 0 none (sign of the engine yawing moment). */
  readonly deadSide: -1 | 0 | 1;
  /** A sample with centred controls and the present levers, to start from. */
  neutralSample(): ControlSample;
  /** Reads inputs, fires events, integrates one tick. No-op once ended. */
  step(sample: ControlSample): void;
  /** Adds an event at run time (live class); it fires at its own trigger, or now. */
  inject(event: ScenarioEvent): void;
  /**
   * Replaces the list of events that a class adds. What differs from the list before must lie at the present tick or after:
   * who learns of an event late goes back to before it first.
   */
  reschedule(injected: readonly InjectedEvent[]): void;
  wantedInto(out: WantedValues): void;
  /** Ends the run as left; results are final. */
  leave(): void;
  criteria(): RunningCriterion[];
  results(): CriterionResult[];
  /** All required criteria met (near counts as met); never true of a run that was left or whose state was not finite. */
  passed(): boolean;
  /** Running hash over every state since tick 0, 16 hex digits. */
  stateHash(): string;
  save(): RunSnapshot;
  restore(snapshot: RunSnapshot): void;
}

/** Throws ScenarioError (scenario-errors.ts) when the scenario does not fit the airframe, ModelError when it cannot be trimmed. */
export type CreateRun = (spec: RunSpec, options?: RunOptions) => Run;
