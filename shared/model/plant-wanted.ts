import { atan2, cos } from '../numerics/elementary.ts';
import { G0 } from '../units/constants.ts';
import { PEDAL_TO_RUDDER, STICK_TO_AILERON } from './controls.ts';
import type { Core } from './plant-core.ts';
import * as D from './plant-memory.ts';
import { BALL_WIDTH_RAD } from './plant-observe.ts';
import { prepareTick } from './plant-tick.ts';
import type { Technique, WantedValues } from './plant-types.ts';
import * as X from './state-layout.ts';
import * as T from './tick-held.ts';
import type { TrimClosure, TrimCondition } from './trim.ts';

const CLOSURES: Readonly<Record<Technique, TrimClosure>> = {
  'zero-sideslip': { kind: 'zero-sideslip' },
  'ball-centred': { kind: 'ball-centred' },
};

/**
 * Wanted values to be filled; all zero and not found.
 *
 * @returns  A fresh record.
 * @throws  Nothing.
 * @sign  none
 * @source  plant-types.ts
 */
export function createWanted(): WantedValues {
  return {
    found: false,
    betaRad: 0,
    phiRad: 0,
    pedal: 0,
    stick: 0,
    aileronRad: 0,
    rudderRad: 0,
    ballWidths: 0,
  };
}

/**
 * A function that fills wanted values of a core.
 *
 * The straight trim of the technique at the present speed, path, density, thrust and drag of the engines and aileron effectiveness. Pedal and stick are what reaches the surfaces from the present trim at
 * the present ratio. Allocates nothing.
 *
 * @param core  The plant's shared parts.
 * @returns     The filling function; rad, cockpit signs for pedal and stick.
 * @throws      Nothing; `found` is false where no trim exists.
 * @sign        As plant-types.ts.
 * @source      Flight model, trim.
 */
export function createWantedSolver(core: Core): (out: WantedValues, technique: Technique) => void {
  const { x, h, e, d, solver, trim, configurations, engineCount } = core;
  const condition: Required<TrimCondition> = {
    tasMps: 0,
    heightM: 0,
    thetaRad: 0,
    densityKgM3: 0,
    engineYawNm: 0,
    engineRollNm: 0,
    aileronEffect: 1,
  };
  const { controls } = configurations[0];

  return (out, technique) => {
    prepareTick(core);
    const V = x[X.X_V];
    const density = h[T.H_DENSITY];
    const q = 0.5 * density * V * V;
    let yaw = 0;
    let roll = 0;
    for (let i = 0, at = 0; i < engineCount; i++, at += T.ENGINE_STRIDE) {
      const thrust = x[X.X_THRUST + i];
      yaw += e[at + T.E_Y] * q * e[at + T.E_AREA] - e[at + T.E_YAW_ARM] * thrust;
      roll -= e[at + T.E_ROLL_ARM] * thrust;
    }
    condition.tasMps = V;
    condition.heightM = x[X.X_HEIGHT];
    condition.thetaRad = x[X.X_THETA];
    condition.densityKgM3 = density;
    condition.engineYawNm = yaw;
    condition.engineRollNm = roll;
    condition.aileronEffect = d[D.D_AILERON_EFFECT];
    const failure = solver.solveInto(trim, configurations[d[D.D_CONFIG]], condition, CLOSURES[technique]);
    out.found = failure === null;
    if (failure !== null) return;
    out.betaRad = trim.betaRad;
    out.phiRad = trim.phiRad;
    out.aileronRad = trim.aileronRad;
    out.rudderRad = trim.rudderRad;
    const scale = controls.rudderRatio?.mode === 'limit' ? 1 : h[T.H_RATIO];
    out.pedal = (PEDAL_TO_RUDDER * (trim.rudderRad - h[T.H_RUDDER_TRIM])) / (scale * controls.rudderMaxRad);
    out.stick = (STICK_TO_AILERON * (trim.aileronRad - core.startTrim.aileronRad)) / controls.aileronMaxRad;
    const lift = configurations[0].massKg * G0 * cos(x[X.X_THETA]) * cos(trim.phiRad);
    out.ballWidths = -atan2(trim.sideForceN, lift) / BALL_WIDTH_RAD;
  };
}
