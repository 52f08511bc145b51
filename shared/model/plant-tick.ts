import { pow } from '../numerics/elementary.ts';
import {
  densityAt,
  densityNear,
  LAPSE_K_PER_M,
  SEA_LEVEL_DENSITY,
  SEA_LEVEL_TEMPERATURE_K,
  standardAtmosphere,
  TROPOPAUSE_M,
  TROPOPAUSE_TEMPERATURE_K,
} from './atmosphere.ts';
import { PEDAL_TO_RUDDER, rudderRatioAt, STICK_TO_AILERON } from './controls.ts';
import { DERIVATIVE_COUNT, derivativesAtInto } from './derivatives.ts';
import { JET_MACH_1, JET_MACH_2, JET_SIGMA_EXPONENT } from './engines.ts';
import { CL_LIMIT_SHARE } from './pitch-assistant.ts';
import { CONFIGURATION_CHANGE_S, turbulent } from './plant-commit.ts';
import type { Core } from './plant-core.ts';
import * as D from './plant-memory.ts';
import { holdPitch } from './plant-pitch.ts';
import { TICK_S } from './plant-types.ts';
import * as X from './state-layout.ts';
import { holdSurfaces } from './surfaces.ts';
import * as T from './tick-held.ts';
import { lateralGustMps, rollGustSigmaRadS, turbulenceScaleInto, yawGustRadS } from './turbulence.ts';

/** Thickness of the layers whose middle anchors the density series; m. */
const LAYER_M = 40;
/** Surface lag of a hardover: the surface runs at its rate up to the stop; s (ours). */
const HARDOVER_LAG_S = TICK_S;

/**
 * Takes what the pilot changed since the last tick: a lever moved takes back an override, a switch turned feathers.
 *
 * @param core  The plant's shared parts; levers and switches of the memory are written.
 * @returns     Nothing.
 * @throws      Nothing.
 * @sign        none
 * @source      plant-types.ts
 */
export function readInputs({ d, inputs, engineCount }: Core): void {
  for (let i = 0, k = D.D_ENGINES; i < engineCount; i++, k += D.ENGINE_MEMORY) {
    if (inputs.levers[i] !== d[k + D.K_LEVER_PILOT]) {
      d[k + D.K_LEVER_PILOT] = inputs.levers[i];
      d[k + D.K_LEVER_HELD] = 0;
    }
    const on = inputs.feather[i] !== 0 ? 1 : 0;
    if (on !== d[k + D.K_SWITCH]) {
      d[k + D.K_SWITCH] = on;
      d[k + D.K_FEATHER] = on;
    }
  }
}

/**
 * Computes the held numbers of the present tick from state, memory and inputs; changes none of the three.
 *
 * @param core  The plant's shared parts; `h` and `e` are written.
 * @returns     Nothing.
 * @throws      Nothing.
 * @sign        As this folder's README.
 * @source      Flight model, sections 4 to 8; inputs and noise are held over a tick.
 */
export function prepareTick(core: Core): void {
  const { h, d } = core;
  h[T.H_TIME] = d[D.D_TICK] * TICK_S;
  holdConfiguration(core);
  if (!core.linear) holdAtmosphere(core);
  holdControls(core);
  holdEngines(core);
  holdAir(core);
  if (!core.linear) holdPitch(core);
}

function holdConfiguration(core: Core): void {
  const { h, d, configurations, rowRanges } = core;
  const now = d[D.D_CONFIG];
  if (h[T.H_CONFIG_HELD] === now) return;
  const aircraft = configurations[now];
  const gone = (h[T.H_TIME] - d[D.D_CONFIG_T0]) / CONFIGURATION_CHANGE_S;
  const old = configurations[d[D.D_CONFIG_OLD]];
  const share = gone < 1 ? 1 - gone : 0;
  h[T.H_ROWS] = rowRanges[now][0];
  h[T.H_ROWS_END] = rowRanges[now][1];
  h[T.H_SHARE_OLD] = share;
  h[T.H_CONFIG_HELD] = share === 0 ? now : -1;
  h[T.H_CL_LIMIT] = CL_LIMIT_SHARE * aircraft.CLmax;
  h[T.H_CD0] = aircraft.CD0;
  h[T.H_K_INDUCED] = aircraft.kInduced;
  h[T.H_CD_BETA2] = aircraft.CDbeta2;
  h[T.H_CL_ALPHA] = aircraft.CLalphaPerRad;
  h[T.H_ALPHA_ZERO_LIFT] = aircraft.alphaZeroLiftRad;
  if (share > 0) {
    h[T.H_ROWS_OLD] = rowRanges[d[D.D_CONFIG_OLD]][0];
    h[T.H_ROWS_OLD_END] = rowRanges[d[D.D_CONFIG_OLD]][1];
    h[T.H_CL_LIMIT] += share * (CL_LIMIT_SHARE * old.CLmax - h[T.H_CL_LIMIT]);
    h[T.H_CD0] += share * (old.CD0 - h[T.H_CD0]);
    h[T.H_K_INDUCED] += share * (old.kInduced - h[T.H_K_INDUCED]);
    h[T.H_CD_BETA2] += share * (old.CDbeta2 - h[T.H_CD_BETA2]);
    h[T.H_CL_ALPHA] += share * (old.CLalphaPerRad - h[T.H_CL_ALPHA]);
    h[T.H_ALPHA_ZERO_LIFT] += share * (old.alphaZeroLiftRad - h[T.H_ALPHA_ZERO_LIFT]);
  }
  if (core.linear) blendedDerivativesInto(core.linearRow, core, h[T.H_CL_TRIM]);
}

/**
 * Writes the derivatives in force at a lift coefficient, blended while the configuration changes.
 *
 * @param out   Derivatives; length 15; per rad.
 * @param core  The plant's shared parts, prepared for the tick.
 * @param CL    Lift coefficient.
 * @returns     Nothing.
 * @throws      Nothing.
 * @sign        As this folder's README.
 * @source      Flight model, airframe data; linear blend over 4 s.
 */
export function blendedDerivativesInto(out: Float64Array, core: Core, CL: number): void {
  const { h, d, configurations, blendRow } = core;
  derivativesAtInto(out, configurations[d[D.D_CONFIG]].derivatives, CL);
  const share = h[T.H_SHARE_OLD];
  if (share === 0) return;
  derivativesAtInto(blendRow, configurations[d[D.D_CONFIG_OLD]].derivatives, CL);
  for (let i = 0; i < DERIVATIVE_COUNT; i++) out[i] += share * (blendRow[i] - out[i]);
}

/**
 * Anchors the atmosphere in the middle of the 40 m layer the aeroplane is in (11 km is an edge of one); within it the
 * right-hand sides take density from a series. The anchor depends on the height alone, so the bits do not depend on the
 * way there.
 */
function holdAtmosphere({ h, x }: Core): void {
  const height = x[X.X_HEIGHT];
  const anchor = (Math.floor(height / LAYER_M) + 0.5) * LAYER_M;
  if (anchor !== h[T.H_REF_HEIGHT]) {
    const density = densityAt(anchor);
    const low = anchor < TROPOPAUSE_M;
    h[T.H_REF_HEIGHT] = anchor;
    h[T.H_REF_DENSITY] = density;
    h[T.H_TROPOSPHERE] = low ? 1 : 0;
    h[T.H_REF_TEMPERATURE] = low ? SEA_LEVEL_TEMPERATURE_K - LAPSE_K_PER_M * anchor : TROPOPAUSE_TEMPERATURE_K;
    if (h[T.H_HAS_JET] !== 0) h[T.H_REF_JET] = pow(density / SEA_LEVEL_DENSITY, JET_SIGMA_EXPONENT);
  }
  h[T.H_DENSITY] = densityNear(height - anchor, h[T.H_REF_DENSITY], h[T.H_REF_TEMPERATURE], h[T.H_TROPOSPHERE] !== 0);
}

/**
 * Fixes density and jet thrust of the small-disturbance motion at the start; called once.
 *
 * @param core  The plant's shared parts with the start state.
 * @returns     Nothing.
 * @throws      Nothing.
 * @sign        none
 * @source      Flight model, small-disturbance: speed and height are constant.
 */
export function holdStartAtmosphere(core: Core): void {
  const { h, x } = core;
  const { densityKgM3, sigma, soundMps } = standardAtmosphere(x[X.X_HEIGHT]);
  const mach = x[X.X_V] / soundMps;
  h[T.H_DENSITY] = densityKgM3;
  h[T.H_REF_JET] = pow(sigma, JET_SIGMA_EXPONENT) * (1 + JET_MACH_1 * mach + JET_MACH_2 * mach * mach);
}

function holdControls(core: Core): void {
  const { h, d, x, inputs, configurations, startTrim } = core;
  const { controls } = configurations[0];
  const eas = x[X.X_V] * Math.sqrt(h[T.H_DENSITY] / SEA_LEVEL_DENSITY);
  h[T.H_EAS] = eas;

  h[T.H_AILERON_EFFECT] = d[D.D_AILERON_EFFECT];
  if (d[D.D_AILERON_FAULT] !== 0) h[T.H_AILERON_CMD] = d[D.D_AILERON_AT];
  else {
    const stick = D.heldWithin(1, inputs.stick);
    const asked = STICK_TO_AILERON * stick * controls.aileronMaxRad + startTrim.aileronRad;
    h[T.H_AILERON_CMD] = D.heldWithin(controls.aileronMaxRad, asked);
  }

  holdPilotRudder(core);
  holdRudder(core);
  holdSurfaces(h, x);
}

/**
 * The pilot's share of the rudder: ratio changer and pedal force at the present speed. What `rudderRatioAt` and
 * `pilotRudderRad` say, without calls that return numbers (a test compares them).
 */
function holdPilotRudder({ h, d, inputs, configurations }: Core): void {
  const { controls } = configurations[0];
  const changer = controls.rudderRatio;
  const state = d[D.D_RATIO_STATE];
  if (state === 1) h[T.H_RATIO] = d[D.D_RATIO_AT];
  else if (state === 2 || changer === null) h[T.H_RATIO] = 1;
  else if (changer.law === 'table') h[T.H_RATIO] = rudderRatioAt(changer, h[T.H_EAS]);
  else {
    const k = h[T.H_EAS] > changer.fullUpToMps ? changer.fullUpToMps / h[T.H_EAS] : 1;
    h[T.H_RATIO] = changer.law === 'inverse' ? k : k * k;
  }
  const clips = changer !== null && changer.mode === 'limit';
  const travel = controls.rudderMaxRad;
  let limit = h[T.H_RATIO] * travel;
  const force = controls.pedalForce;
  if (force !== null) {
    let held = force.limitN / force.newtonPerRad;
    if (force.kind === 'reversible') {
      const speeds = force.atMps / h[T.H_EAS];
      held *= speeds * speeds;
    } else if (!clips) held *= h[T.H_RATIO];
    if (held < limit) limit = held;
  }
  const pedal = D.heldWithin(1, inputs.pedal);
  const asked = PEDAL_TO_RUDDER * pedal * travel;
  h[T.H_RUDDER_PILOT] = D.heldWithin(limit, clips ? asked : h[T.H_RATIO] * asked);
}

/** Trim, yaw damper and faults of the rudder. */
function holdRudder({ h, d, x, inputs, configurations }: Core): void {
  const aircraft = configurations[0];
  const { controls } = aircraft;
  h[T.H_RUDDER_TRIM] =
    D.rampAt(d[D.D_TRIM_FROM], d[D.D_TRIM_TO], d[D.D_TRIM_T0], d[D.D_TRIM_T1], h[T.H_TIME]) +
    PEDAL_TO_RUDDER * D.heldWithin(1, inputs.rudderTrim) * controls.rudderMaxRad;
  // The damper is sampled at the tick (ours); δr > 0 yaws left, so a positive gain opposes yaw to the right.
  const damper = aircraft.yawDamper;
  h[T.H_DAMPER] =
    damper !== null && d[D.D_DAMPER_ON] !== 0
      ? D.heldWithin(damper.authorityRad, damper.gainS * (x[X.X_R] - x[X.X_WASHOUT]))
      : 0;
  const fault = d[D.D_RUDDER_FAULT];
  h[T.H_RUDDER_CMD] =
    fault !== 0
      ? d[D.D_RUDDER_AT]
      : D.heldWithin(controls.rudderMaxRad, h[T.H_RUDDER_PILOT] + h[T.H_RUDDER_TRIM] + h[T.H_DAMPER]);
  h[T.H_INV_LAG_RUDDER] = fault === 2 ? 1 / HARDOVER_LAG_S : h[T.H_INV_LAG];
}

function holdEngines({ h, d, e, configurations, engineCount }: Core): void {
  const { engines } = configurations[0];
  const t = h[T.H_TIME];
  for (let i = 0; i < engineCount; i++) {
    const k = D.D_ENGINES + i * D.ENGINE_MEMORY;
    const at = i * T.ENGINE_STRIDE;
    const engine = engines[i];
    const asked =
      d[k + D.K_LEVER_HELD] !== 0
        ? D.rampAt(d[k + D.K_LEVER_FROM], d[k + D.K_LEVER_TO], d[k + D.K_LEVER_T0], d[k + D.K_LEVER_T1], t)
        : d[k + D.K_LEVER_PILOT];
    const lever = asked > 1 ? 1 : asked < 0 ? 0 : asked;
    const failure = d[k + D.K_FAILURE];
    const feather = d[k + D.K_FEATHER] !== 0;
    e[at + T.E_LEVER] = lever;
    const driving = failure === 1 || feather ? 0 : failure === 3 ? d[k + D.K_SHARE] : 1;
    if (engine.kind === 'jet') {
      // A jet cannot feather: its switch shuts it down, and it windmills.
      e[at + T.E_FACTOR] = lever * driving;
      e[at + T.E_AREA] = failure === 1 || feather ? engine.windmillAreaM2 : 0;
      e[at + T.E_AREA_RATE] = 0;
      e[at + T.E_FEATHER_NEXT] = 0;
      continue;
    }
    const open = failure === 1 ? engine.windmillAreaM2 : 0;
    const span = engine.featheredAreaM2 - open;
    let position = d[k + D.K_FEATHER_AT];
    let next = position;
    if (engine.featherTimeS === 0) {
      position = feather ? 1 : 0;
      next = position;
    } else if (feather) next = Math.min(1, position + TICK_S / engine.featherTimeS);
    else if (position > 0) next = Math.max(0, position - TICK_S / engine.featherTimeS);
    e[at + T.E_FACTOR] = lever * driving * (1 - (feather ? 0 : position));
    e[at + T.E_AREA] = open + span * position;
    e[at + T.E_AREA_RATE] = (span * (next - position)) / TICK_S;
    e[at + T.E_FEATHER_NEXT] = next;
  }
}

function holdAir({ h, d, x, setup, groundM, turbulence, configurations }: Core): void {
  const t = h[T.H_TIME];
  const changing = t >= d[D.D_WIND_T0] && t < d[D.D_WIND_T1];
  h[T.H_WIND_VARIES] = changing || setup.air.profile !== 'none' ? 1 : 0;
  h[T.H_WIND_NORTH] = d[D.D_WIND_TO_N];
  h[T.H_WIND_EAST] = d[D.D_WIND_TO_E];
  h[T.H_GUST_COUNT] = d[D.D_GUST_COUNT];
  let gustV = d[D.D_GUST_V];
  let gustP = d[D.D_GUST_P];
  let gustR = d[D.D_GUST_R];
  if (turbulent(d, t)) {
    const t0 = d[D.D_TURB_T0];
    const t1 = d[D.D_TURB_T1];
    const w20 = D.rampAt(d[D.D_TURB_FROM_W20], d[D.D_TURB_TO_W20], t0, t1, t);
    const high = D.rampAt(d[D.D_TURB_FROM_HIGH], d[D.D_TURB_TO_HIGH], t0, t1, t);
    turbulenceScaleInto(turbulence, w20, high, x[X.X_HEIGHT] - groundM);
    const { lateralSigmaMps, verticalSigmaMps, verticalLengthM } = turbulence;
    const span = configurations[0].spanM;
    gustV += lateralGustMps(d, D.D_TURB_X1, lateralSigmaMps);
    gustR += yawGustRadS(d, D.D_TURB_X1, lateralSigmaMps, span);
    gustP += rollGustSigmaRadS(verticalSigmaMps, verticalLengthM, span) * d[D.D_TURB_XP];
  }
  h[T.H_GUST_V] = gustV;
  h[T.H_GUST_P] = gustP;
  h[T.H_GUST_R] = gustR;
}
