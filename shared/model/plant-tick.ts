import { pow } from '../numerics/elementary.ts';
import {
  densityAt,
  densityNear,
  GAS_CONSTANT,
  HEAT_RATIO,
  LAPSE_K_PER_M,
  SEA_LEVEL_DENSITY,
  SEA_LEVEL_TEMPERATURE_K,
  standardAtmosphere,
  temperatureK,
  TROPOPAUSE_M,
  TROPOPAUSE_TEMPERATURE_K,
} from './atmosphere.ts';
import { casInAir } from './airspeeds.ts';
import { retireGusts } from './air.ts';
import { pedalToRudderRad, pilotRudderRad, rudderRatioAt, stickToAileronRad } from './controls.ts';
import { DERIVATIVE_COUNT, derivativesAtInto } from './derivatives.ts';
import { JET_MACH_1, JET_MACH_2, JET_SIGMA_EXPONENT } from './engines.ts';
import * as P from './pitch-assistant.ts';
import type { Core } from './plant-core.ts';
import * as D from './plant-memory.ts';
import { TICK_S } from './plant-types.ts';
import * as X from './state-layout.ts';
import * as T from './tick-held.ts';
import {
  advanceTurbulence,
  lateralGustMps,
  rollGustSigmaRadS,
  turbulenceScaleInto,
  yawGustRadS,
} from './turbulence.ts';

/** Codes of the pitch modes in the memory. */
export const PITCH_CODES = {
  'hold-lift': 0,
  'hold-path': 1,
  'hold-speed': 2,
  decelerate: 3,
  glidepath: 4,
  manual: 5,
} as const;

/** Time a change of configuration takes; s. */
export const CONFIGURATION_CHANGE_S = 4;
/** Thickness of the layers whose middle anchors the density series; m. */
const LAYER_M = 40;
/** Surface lag of a hardover: the surface runs at its rate up to the stop; s (ours). */
const HARDOVER_LAG_S = TICK_S;

/** Takes what the pilot changed since the last tick: a lever moved takes back an override, a switch turned feathers. */
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

/** Computes the held numbers of the present tick from state, memory and inputs; changes neither. */
export function prepareTick(core: Core): void {
  const { h, d } = core;
  const t = d[D.D_TICK] * TICK_S;
  h[T.H_TIME] = t;
  holdConfiguration(core, t);
  if (!core.linear) holdAtmosphere(core);
  holdControls(core, t);
  holdEngines(core, t);
  holdAir(core, t);
  if (!core.linear) holdPitch(core);
}

function held(limit: number, value: number): number {
  return value > limit ? limit : value < -limit ? -limit : value;
}

function holdConfiguration(core: Core, t: number): void {
  const { h, d, configurations, rowRanges } = core;
  const now = d[D.D_CONFIG];
  if (h[T.H_CONFIG_HELD] === now) return;
  const aircraft = configurations[now];
  const gone = (t - d[D.D_CONFIG_T0]) / CONFIGURATION_CHANGE_S;
  const old = configurations[d[D.D_CONFIG_OLD]];
  const share = gone < 1 ? 1 - gone : 0;
  h[T.H_ROWS] = rowRanges[now][0];
  h[T.H_ROWS_END] = rowRanges[now][1];
  h[T.H_SHARE_OLD] = share;
  h[T.H_CONFIG_HELD] = share === 0 ? now : -1;
  h[T.H_CL_LIMIT] = P.CL_LIMIT_SHARE * aircraft.CLmax;
  h[T.H_CD0] = aircraft.CD0;
  h[T.H_K_INDUCED] = aircraft.kInduced;
  h[T.H_CD_BETA2] = aircraft.CDbeta2;
  h[T.H_CL_ALPHA] = aircraft.CLalphaPerRad;
  h[T.H_ALPHA_ZERO_LIFT] = aircraft.alphaZeroLiftRad;
  if (share > 0) {
    h[T.H_ROWS_OLD] = rowRanges[d[D.D_CONFIG_OLD]][0];
    h[T.H_ROWS_OLD_END] = rowRanges[d[D.D_CONFIG_OLD]][1];
    h[T.H_CL_LIMIT] += share * (P.CL_LIMIT_SHARE * old.CLmax - h[T.H_CL_LIMIT]);
    h[T.H_CD0] += share * (old.CD0 - h[T.H_CD0]);
    h[T.H_K_INDUCED] += share * (old.kInduced - h[T.H_K_INDUCED]);
    h[T.H_CD_BETA2] += share * (old.CDbeta2 - h[T.H_CD_BETA2]);
    h[T.H_CL_ALPHA] += share * (old.CLalphaPerRad - h[T.H_CL_ALPHA]);
    h[T.H_ALPHA_ZERO_LIFT] += share * (old.alphaZeroLiftRad - h[T.H_ALPHA_ZERO_LIFT]);
  }
  if (core.linear) blendedDerivativesInto(core.linearRow, core, h[T.H_CL_TRIM]);
}

/** Writes the derivatives in force at a lift coefficient, blended while the configuration changes. */
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

/** Fixes density and jet thrust of the small-disturbance motion at the start; called once. */
export function holdStartAtmosphere(core: Core): void {
  const { h, x } = core;
  const { densityKgM3, sigma, soundMps } = standardAtmosphere(x[X.X_HEIGHT]);
  const mach = x[X.X_V] / soundMps;
  h[T.H_DENSITY] = densityKgM3;
  h[T.H_REF_JET] = pow(sigma, JET_SIGMA_EXPONENT) * (1 + JET_MACH_1 * mach + JET_MACH_2 * mach * mach);
}

function holdControls({ h, d, x, inputs, configurations, startTrim }: Core, t: number): void {
  const aircraft = configurations[0];
  const { controls } = aircraft;
  const eas = x[X.X_V] * Math.sqrt(h[T.H_DENSITY] / SEA_LEVEL_DENSITY);
  h[T.H_EAS] = eas;

  const lag = 1 / controls.lagS;
  h[T.H_INV_LAG_AILERON] = lag;
  h[T.H_AILERON_EFFECT] = d[D.D_AILERON_EFFECT];
  if (d[D.D_AILERON_FAULT] !== 0) h[T.H_AILERON_CMD] = d[D.D_AILERON_AT];
  else {
    const stick = held(1, inputs.stick);
    const asked = stickToAileronRad(stick, controls.aileronMaxRad) + startTrim.aileronRad;
    h[T.H_AILERON_CMD] = held(controls.aileronMaxRad, asked);
  }

  const state = d[D.D_RATIO_STATE];
  const ratio = state === 0 ? rudderRatioAt(controls.rudderRatio, eas) : state === 1 ? d[D.D_RATIO_AT] : 1;
  h[T.H_RATIO] = ratio;
  const pedal = held(1, inputs.pedal);
  h[T.H_RUDDER_PILOT] = pedal === 0 ? 0 : pilotRudderRad(controls, pedal, eas, ratio);
  h[T.H_RUDDER_TRIM] =
    D.rampAt(d[D.D_TRIM_FROM], d[D.D_TRIM_TO], d[D.D_TRIM_T0], d[D.D_TRIM_T1], t) +
    pedalToRudderRad(held(1, inputs.rudderTrim), controls.rudderMaxRad);
  h[T.H_RUDDER_FAULT] = d[D.D_RUDDER_FAULT];
  h[T.H_RUDDER_CMD] = d[D.D_RUDDER_AT];
  h[T.H_INV_LAG_RUDDER] = d[D.D_RUDDER_FAULT] === 2 ? 1 / HARDOVER_LAG_S : lag;
  const damper = aircraft.yawDamper;
  h[T.H_DAMPER_GAIN] = damper !== null && d[D.D_DAMPER_ON] !== 0 ? damper.gainS : 0;
}

function holdEngines({ d, e, configurations, engineCount }: Core, t: number): void {
  const { engines } = configurations[0];
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

/** Whether turbulence acts at a run time. */
function turbulent(d: Float64Array, t: number): boolean {
  if (d[D.D_TURB_TO_W20] !== 0 || d[D.D_TURB_TO_HIGH] !== 0) return true;
  return t < d[D.D_TURB_T1] && (d[D.D_TURB_FROM_W20] !== 0 || d[D.D_TURB_FROM_HIGH] !== 0);
}

function holdAir({ h, d, x, setup, groundM, turbulence, configurations }: Core, t: number): void {
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

function holdPitch({ h, d, x, inputs, setup }: Core): void {
  const mode = d[D.D_PITCH_MODE];
  h[T.H_PITCH] = mode === PITCH_CODES['hold-lift'] ? 0 : 1;
  h[T.H_INTEGRAL_NEXT] = d[D.D_SPEED_INTEGRAL];
  let path = d[D.D_PATH];
  let rate = 0;
  if (mode === PITCH_CODES['hold-speed'] || mode === PITCH_CODES.decelerate) {
    const temperature = temperatureK(x[X.X_HEIGHT]);
    const pressure = h[T.H_DENSITY] * GAS_CONSTANT * temperature;
    const sound = Math.sqrt(HEAT_RATIO * GAS_CONSTANT * temperature);
    const excess = casInAir(x[X.X_V], pressure, sound) - d[D.D_SPEED_TARGET];
    const integral = d[D.D_SPEED_INTEGRAL];
    const wanted = P.speedHoldPathRad(excess, integral);
    if (!P.speedHoldClamped(excess, integral)) h[T.H_INTEGRAL_NEXT] = integral + excess * TICK_S;
    rate = held(P.SPEED_PATH_RATE_RADS, (wanted - path) / TICK_S);
  } else if (mode === PITCH_CODES.glidepath && setup.runway) {
    const { runway } = setup;
    path = P.glidepathPathRad(
      runway.glidepathRad,
      runway.thresholdM - P.alongRunwayM(x[X.X_NORTH], x[X.X_EAST], runway.headingRad),
      x[X.X_HEIGHT] - runway.elevationM,
      runway.gearHeightM,
    );
  } else if (mode === PITCH_CODES.manual) {
    const next = path + P.MANUAL_RATE_RADS * held(1, inputs.pitch) * TICK_S;
    const top = Math.max(P.MANUAL_LIMIT_RAD, path);
    const bottom = Math.min(-P.MANUAL_LIMIT_RAD, path);
    rate = ((next > top ? top : next < bottom ? bottom : next) - path) / TICK_S;
  }
  h[T.H_PATH] = path;
  h[T.H_PATH_RATE] = rate;
}

/** Writes what the tick just flown leaves in the memory: ramps, filters, the tick count. */
export function commitTick(core: Core): void {
  const { h, d, e, x, engineCount, turbulence, stream, configurations } = core;
  const t = h[T.H_TIME];
  if (!core.linear) {
    d[D.D_PATH] = h[T.H_PATH] + h[T.H_PATH_RATE] * TICK_S;
    d[D.D_SPEED_INTEGRAL] = h[T.H_INTEGRAL_NEXT];
  }
  if (d[D.D_SPEED_FALL] !== 0) {
    d[D.D_SPEED_TARGET] = Math.max(d[D.D_SPEED_FLOOR], d[D.D_SPEED_TARGET] - d[D.D_SPEED_FALL] * TICK_S);
  }
  for (let i = 0, k = D.D_ENGINES; i < engineCount; i++, k += D.ENGINE_MEMORY) {
    d[k + D.K_FEATHER_AT] = e[i * T.ENGINE_STRIDE + T.E_FEATHER_NEXT];
  }
  if (turbulent(d, t)) {
    const speed = Math.max(x[X.X_V], 1);
    advanceTurbulence(d, D.D_TURB_X1, stream, speed, turbulence.lateralLengthM, configurations[0].spanM, TICK_S);
  }
  const tick = d[D.D_TICK] + 1;
  d[D.D_TICK] = tick;
  if (d[D.D_GUST_COUNT] !== 0) retireGusts(d, tick * TICK_S, x[X.X_DISTANCE]);
  if (d[D.D_CONFIG_NEXT] >= 0 && tick * TICK_S - d[D.D_CONFIG_T0] >= CONFIGURATION_CHANGE_S) {
    startConfiguration(d, d[D.D_CONFIG_NEXT]);
  }
}

/** Begins the change to a configuration now; the one in force is blended out. */
export function startConfiguration(d: Float64Array, index: number): void {
  d[D.D_CONFIG_OLD] = d[D.D_CONFIG];
  d[D.D_CONFIG] = index;
  d[D.D_CONFIG_T0] = d[D.D_TICK] * TICK_S;
  d[D.D_CONFIG_NEXT] = -1;
}
