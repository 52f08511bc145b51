/** Feeds a measure with constructed ticks, without an aeroplane: what it sees is written by the test. */
import { createObservation } from '#shared/model/plant.ts';
import type { Observation } from '#shared/model/plant-types.ts';
import { MADE_COUNT, MADE_SIGNAL, STATE_SIGNAL } from '#shared/scenario/expression/names.ts';
import { CriterionTracker } from '#shared/scenario/criterion-tracker.ts';
import type { CriterionResult, EndReason } from '#shared/scenario/run-types.ts';
import type { ScenarioCriterion } from '#shared/scenario/scenario-schema.ts';
import type { Signals } from '#shared/scenario/signals.ts';
import { DEG, KT } from '#shared/units/constants.ts';

/** One constructed tick; what is left out is zero. */
export interface Moment {
  bankDeg?: number;
  rDegS?: number;
  pDegS?: number;
  betaDeg?: number;
  psiDeg?: number;
  thetaDeg?: number;
  heightM?: number;
  casKt?: number;
  pedal?: number;
  ball?: number;
  trackErrorDeg?: number;
  offsetM?: number;
  acrossMps?: number;
  levers?: number[];
  feather?: number[];
  full?: Partial<Observation>;
}

export interface Constructed {
  /** Seconds, at 120 ticks each. */
  seconds: number;
  moment: (timeS: number) => Moment;
  deadSide?: -1 | 0 | 1;
  /** Engine states: 1 failed. */
  failed?: number[];
  ended?: EndReason;
}

/** The result of a criterion over the whole of a constructed run. */
export function judge(
  criterion: Partial<ScenarioCriterion> & Pick<ScenarioCriterion, 'measure' | 'limit'>,
  made: Constructed,
): CriterionResult {
  const full: ScenarioCriterion = { id: 'c', title: 'C', required: true, from: 'start', to: 'end', ...criterion };
  const tracker = new CriterionTracker(full, () => ({ firedTick: -1 }));
  const observation = createObservation(2);
  const x = new Float64Array(20);
  const v = new Float64Array(MADE_COUNT);
  const failure = Uint8Array.from(made.failed ?? [0, 0]);
  const inputs = { feather: new Uint8Array(2) };
  const engines = {
    deadSide: made.deadSide ?? 0,
    anyFailed: failure.some((f) => f !== 0),
    failure,
    feathered: new Uint8Array(2),
  };
  const signals = {
    tick: 0,
    x,
    v,
    engines,
    plant: { inputs },
    ended: null as EndReason | null,
    startCasMps: 0,
    trackErrorRad: 0,
    trackOffsetM: 0,
    acrossMps: 0,
    sinceS: () => NaN,
    full: () => observation,
  };
  // The measures read only what is written here; a whole Signals would need an aeroplane.
  const seen = signals as unknown as Signals;
  const ticks = Math.round(made.seconds * 120);
  for (let tick = 0; tick <= ticks; tick++) {
    const m = made.moment(tick / 120);
    signals.tick = tick;
    x[STATE_SIGNAL.phiRad] = (m.bankDeg ?? 0) * DEG;
    x[STATE_SIGNAL.rRadS] = (m.rDegS ?? 0) * DEG;
    x[STATE_SIGNAL.pRadS] = (m.pDegS ?? 0) * DEG;
    x[STATE_SIGNAL.betaRad] = (m.betaDeg ?? 0) * DEG;
    x[STATE_SIGNAL.psiRad] = (m.psiDeg ?? 0) * DEG;
    x[STATE_SIGNAL.thetaRad] = (m.thetaDeg ?? 0) * DEG;
    x[STATE_SIGNAL.heightM] = m.heightM ?? 0;
    v[MADE_SIGNAL.casMps] = (m.casKt ?? 0) * KT;
    v[MADE_SIGNAL.pedal] = m.pedal ?? 0;
    v[MADE_SIGNAL.ballWidths] = m.ball ?? 0;
    signals.trackErrorRad = (m.trackErrorDeg ?? 0) * DEG;
    signals.trackOffsetM = m.offsetM ?? 0;
    signals.acrossMps = m.acrossMps ?? 0;
    Object.assign(observation, m.full);
    observation.levers.set(m.levers ?? [1, 1]);
    inputs.feather.set(m.feather ?? [0, 0]);
    if (tick === 0) signals.startCasMps = v[MADE_SIGNAL.casMps];
    if (tick < ticks) {
      tracker.tryOpen(seen, false);
      if (tracker.isRunning) tracker.sampleBounded(seen);
    } else {
      signals.ended = made.ended ?? 'completed';
      tracker.finish(seen);
    }
  }
  return tracker.result();
}
