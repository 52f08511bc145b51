import { createTrimSolution, createTrimSolver } from '../model/trim.ts';
import type { TrimCondition } from '../model/trim.ts';
import { createObservation, createWanted } from '../model/plant.ts';
import { TICK_S } from '../model/plant-types.ts';
import type { Plant, Technique } from '../model/plant-types.ts';
import * as X from '../model/state-layout.ts';
import { asin, cos, exp, sin } from '../numerics/elementary.ts';
import { wrapPi } from '../units/angles.ts';
import { DEG, FT } from '../units/constants.ts';
import { pilotGains } from './pilot-gains.ts';
import { turnTrim } from './turn-trim.ts';

/** What the reference pilot does beyond keeping the aeroplane straight. Angles in rad, heights in m. */
export type PilotTask =
  | { kind: 'hold-heading' }
  | { kind: 'turn'; bankRad: number }
  | { kind: 'hold-track'; decrabM: number; headingRad: number; elevationM: number };

/** Lag of the pilot's hands and feet; s (ours). */
const PILOT_LAG_S = 0.1;
/** Heading errors count no further than this (ours). */
const HEADING_CLAMP_RAD = 10 * DEG;
/** Bank wanted for being off the line and off the track, and its bound (ours, tuned on the shipped crosswind scenarios). */
const OFFSET_BANK_RAD_PER_M = (0.1 * DEG) / FT;
const TRACK_BANK = 1;
const TRACK_BANK_LIMIT_RAD = 10 * DEG;

/** Memory of the pilot between ticks. */
export interface PilotMemory {
  stick: number;
  pedal: number;
  integral: number;
}

export interface PilotCore {
  /** Moves stick and pedal on by one tick from the plant's present state. Fractions of travel, right positive. */
  step(): void;
  readonly stick: number;
  readonly pedal: number;
  save(): PilotMemory;
  restore(memory: PilotMemory): void;
}

/**
 * The reference pilot's control law on a plant.
 *
 * u = δ* − K·[β−β*, p, r, φ−φ*, e_ψ, ∫e_ψ], starred values from the straight trim of the technique with the present engine
 * moments at the present speed. The heading error is clamped and integrated only inside the clamp while the rudder has
 * travel left. Commands pass a first-order lag; travel and rate limits are the plant's.
 *
 * hold-track (laws ours): the bank wanted is −0.1°/ft of offset − 1·track error within ±10°, the heading wanted is the crab
 * heading; below the de-crab height the heading wanted is the runway's, with bank and surfaces of the steady sideslip.
 *
 * turn (ours): p*, r* and the surfaces of a steady turn without sideslip; without them the yaw-rate term would hold the
 * turn back and leave it slipping.
 *
 * @param plant      The plant; read at every step.
 * @param task       What to hold.
 * @param technique  Which trim is wanted.
 * @param start      Start condition at which the gains hold: true airspeed (m/s), height (m), path (rad).
 * @returns          The pilot, hands on the trimmed controls.
 * @throws {NumericsError} uncontrollable-pair, no-stabilising-solution.
 * @sign             Right positive.
 * @source           Flight model, reference pilot.
 */
export function createPilotCore(
  plant: Plant,
  task: PilotTask,
  technique: Technique,
  start: { tasMps: number; heightM: number; thetaRad: number },
): PilotCore {
  const gains = pilotGains(plant.aircraft, start);
  const turn = task.kind === 'turn' ? turnTrim(plant.aircraft, start, task.bankRad) : null;
  const wanted = createWanted();
  const solver = createTrimSolver();
  const slip = createTrimSolution();
  const condition: TrimCondition = { tasMps: 0, heightM: 0, thetaRad: 0 };
  const startPsi = plant.x[X.X_PSI];
  const share = 1 - exp(-TICK_S / PILOT_LAG_S);
  const memory: PilotMemory = { stick: 0, pedal: 0, integral: 0 };
  const seen = createObservation(plant.engineCount);

  const clamp = (value: number, limit: number): number => (value > limit ? limit : value < -limit ? -limit : value);

  return {
    step() {
      const { x, aircraft } = plant;
      const { controls } = aircraft;
      const looks = task.kind === 'hold-track' || controls.rudderRatio !== null;
      if (looks) plant.observeInto(seen);
      const scale = controls.rudderRatio === null || controls.rudderRatio.mode === 'limit' ? 1 : seen.rudderRatio;
      plant.wantedInto(wanted, technique);
      let betaStar = wanted.found ? wanted.betaRad : 0;
      let phiStar = wanted.found ? wanted.phiRad : 0;
      let stickStar = wanted.found ? wanted.stick : 0;
      let pedalStar = wanted.found ? wanted.pedal : 0;
      let aileronStar = wanted.found ? wanted.aileronRad : plant.startTrim.aileronRad;
      let rudderStar = wanted.found ? wanted.rudderRad : plant.startTrim.rudderRad;
      let headingError = x[X.X_PSI] - startPsi;
      let integrate = true;
      if (turn !== null && task.kind === 'turn') {
        phiStar = task.bankRad;
        aileronStar += turn.aileronRad;
        rudderStar += turn.rudderRad;
        stickStar += turn.aileronRad / controls.aileronMaxRad;
        pedalStar -= turn.rudderRad / (scale * controls.rudderMaxRad);
        headingError = 0;
        integrate = false;
      } else if (task.kind === 'hold-track') {
        const c = cos(task.headingRad);
        const s = sin(task.headingRad);
        const V = x[X.X_V];
        const acrossWind = -s * seen.windNorthMps + c * seen.windEastMps; // moving to the right of the runway
        const offset = -s * x[X.X_NORTH] + c * x[X.X_EAST];
        const trackError = seen.groundSpeedMps > 1 ? wrapPi(seen.trackRad - task.headingRad) : 0;
        const crab = -asin(clamp(acrossWind / (V > 1 ? V : 1), 0.9));
        const height = x[X.X_HEIGHT] - task.elevationM;
        const toRunway = wrapPi(x[X.X_PSI] - task.headingRad);
        if (height > task.decrabM) {
          phiStar += clamp(-OFFSET_BANK_RAD_PER_M * offset - TRACK_BANK * trackError, TRACK_BANK_LIMIT_RAD);
          headingError = toRunway - crab;
        } else {
          // Air moving to the right of the runway meets the aligned aeroplane from the left: negative sideslip.
          condition.tasMps = V;
          condition.heightM = x[X.X_HEIGHT];
          condition.thetaRad = x[X.X_THETA];
          const found = solver.solveInto(slip, aircraft, condition, { kind: 'sideslip', betaRad: crab });
          if (found === null) {
            stickStar = (slip.aileronRad - plant.startTrim.aileronRad) / controls.aileronMaxRad;
            pedalStar = -(slip.rudderRad - plant.startTrim.rudderRad) / (scale * controls.rudderMaxRad);
            aileronStar = slip.aileronRad;
            rudderStar = slip.rudderRad;
            betaStar = slip.betaRad;
            phiStar = slip.phiRad;
          }
          headingError = toRunway;
        }
        headingError = wrapPi(headingError);
        integrate = height > task.decrabM;
      }
      const clamped = clamp(headingError, HEADING_CLAMP_RAD);
      const z0 = x[X.X_BETA] - betaStar;
      const z1 = x[X.X_P] - (turn === null ? 0 : turn.rollRateRadS);
      const z2 = x[X.X_R] - (turn === null ? 0 : turn.yawRateRadS);
      const z3 = x[X.X_PHI] - phiStar;
      const aileron = -(
        gains[0] * z0 +
        gains[1] * z1 +
        gains[2] * z2 +
        gains[3] * z3 +
        gains[4] * clamped +
        gains[5] * memory.integral
      );
      const rudder = -(
        gains[6] * z0 +
        gains[7] * z1 +
        gains[8] * z2 +
        gains[9] * z3 +
        gains[10] * clamped +
        gains[11] * memory.integral
      );
      // Commands stay within the surfaces' travel; pedal and stick are what brings the surfaces there from the present trim.
      const aileronWanted = clamp(aileronStar + aileron, controls.aileronMaxRad);
      const rudderWanted = rudderStar + rudder;
      const rudderHeld = clamp(rudderWanted, scale * controls.rudderMaxRad);
      const stick = stickStar + (aileronWanted - aileronStar) / controls.aileronMaxRad;
      const pedal = pedalStar - (rudderHeld - rudderStar) / (scale * controls.rudderMaxRad);
      const unsaturated = rudderHeld === rudderWanted && Math.abs(pedal) < 1;
      if (integrate && clamped === headingError && unsaturated) memory.integral += clamped * TICK_S;
      memory.stick += share * (clamp(stick, 1) - memory.stick);
      memory.pedal += share * (clamp(pedal, 1) - memory.pedal);
    },
    get stick() {
      return memory.stick;
    },
    get pedal() {
      return memory.pedal;
    },
    save: () => ({ ...memory }),
    restore(kept) {
      memory.stick = kept.stick;
      memory.pedal = kept.pedal;
      memory.integral = kept.integral;
    },
  };
}
