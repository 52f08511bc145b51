import { cos, sin } from '../numerics/elementary.ts';
import { casFromTas } from './airspeeds.ts';
import { addGustTo, SHORTEST_WIND_CHANGE_S } from './air.ts';
import { pedalToRudderRad, rudderRatioAt } from './controls.ts';
import { ModelError, requireFiniteNumber } from './errors.ts';
import { CONFIGURATION_CHANGE_S, startConfiguration } from './plant-commit.ts';
import type { Core } from './plant-core.ts';
import * as D from './plant-memory.ts';
import { PITCH_CODES } from './plant-pitch.ts';
import { TICK_S } from './plant-types.ts';
import type { PitchMode, Plant } from './plant-types.ts';
import * as X from './state-layout.ts';
import * as T from './tick-held.ts';
import { TURBULENCE_LEVELS } from './turbulence.ts';

/** The event methods of a plant. */
export type PlantEvents = Pick<
  Plant,
  | 'failEngine'
  | 'failEnginePartial'
  | 'restoreEngine'
  | 'featherEngine'
  | 'setLever'
  | 'addGust'
  | 'changeWind'
  | 'setTurbulence'
  | 'jamRudder'
  | 'jamAileron'
  | 'hardoverRudder'
  | 'halveAileron'
  | 'restoreControls'
  | 'setRudderTrim'
  | 'setYawDamper'
  | 'setRudderRatio'
  | 'setPitchMode'
  | 'setConfiguration'
>;

/**
 * Takes up a pitch mode now: its path starts at the present path, a falling target at the present speed.
 *
 * @param core  The plant's shared parts; the memory is written.
 * @param mode  The mode and its members; rad, m/s, m/s² (a fall; its sign does not matter).
 * @returns     Nothing.
 * @throws {ModelError} no-runway for a glidepath without one, non-finite-input.
 * @sign        climb positive
 * @source      Flight model, pitch assistant.
 */
export function enterPitchMode({ d, x, setup }: Core, mode: PitchMode): void {
  const path = x[X.X_THETA];
  const cas = casFromTas(x[X.X_V], x[X.X_HEIGHT]);
  d[D.D_PITCH_MODE] = PITCH_CODES[mode.mode];
  d[D.D_PATH] = path;
  d[D.D_SPEED_INTEGRAL] = 0;
  d[D.D_SPEED_FALL] = 0;
  d[D.D_SPEED_FLOOR] = 0;
  if (mode.mode === 'hold-path' || (mode.mode === 'manual' && mode.pathRad !== undefined)) {
    requireFiniteNumber(mode.pathRad ?? path, 'path');
    d[D.D_PATH] = mode.pathRad ?? path;
  } else if (mode.mode === 'hold-speed') {
    requireFiniteNumber(mode.targetCasMps, 'target speed');
    d[D.D_SPEED_TARGET] = mode.targetCasMps;
  } else if (mode.mode === 'decelerate') {
    requireFiniteNumber(mode.rateMps2, 'rate');
    requireFiniteNumber(mode.targetCasMps ?? 0, 'target speed');
    d[D.D_SPEED_TARGET] = cas;
    d[D.D_SPEED_FALL] = Math.abs(mode.rateMps2);
    d[D.D_SPEED_FLOOR] = Math.min(cas, mode.targetCasMps ?? 0);
  } else if (mode.mode === 'glidepath' && !setup.runway) {
    throw new ModelError('no-runway', 'the pitch mode "glidepath" needs a runway', 'pitch mode');
  }
}

/**
 * The event methods over a core; each takes effect from the next step.
 *
 * A partial failure leaves `fraction` of the thrust (ours). A jam at an angle sends the surface there at its own rate. A
 * rudder-trim event sets the whole trim. A configuration asked for while another is changing waits for it.
 *
 * @param core  The plant's shared parts; the memory is written.
 * @returns     The methods of `Plant`; SI, rad, surfaces with model signs.
 * @throws      Nothing itself; the methods throw ModelError unknown-engine, unknown-configuration, no-runway,
 *              too-many-gusts, bad-argument, non-finite-input.
 * @sign        As this folder's README; gust peaks to the right positive.
 * @source      Flight model, sections 4 to 8; scenario contract, event kinds.
 */
export function createPlantEvents(core: Core): PlantEvents {
  const { d, x, h, engineCount, configurations, inputs } = core;
  const now = (): number => d[D.D_TICK] * TICK_S;
  const engineAt = (index: number): number => {
    if (!Number.isInteger(index) || index < 0 || index >= engineCount) {
      throw new ModelError('unknown-engine', `there is no engine ${index} (there are ${engineCount})`, 'engine');
    }
    return D.D_ENGINES + index * D.ENGINE_MEMORY;
  };
  const jam = (fault: number, at: number, surface: number, limit: number, rad: number | undefined): void => {
    const held = rad ?? x[surface];
    requireFiniteNumber(held, 'jam angle');
    d[fault] = 1;
    d[at] = Math.min(Math.max(held, -limit), limit);
  };
  const { controls } = configurations[0];

  return {
    failEngine(index, propeller) {
      const k = engineAt(index);
      d[k + D.K_FAILURE] = 1;
      if (propeller === 'feathered') d[k + D.K_FEATHER] = 1;
    },
    failEnginePartial(index, fraction) {
      const k = engineAt(index);
      requireFiniteNumber(fraction, 'fraction');
      d[k + D.K_FAILURE] = 3;
      d[k + D.K_SHARE] = Math.min(Math.max(fraction, 0), 1);
    },
    restoreEngine(index) {
      const k = engineAt(index);
      d[k + D.K_FAILURE] = 0;
      d[k + D.K_SHARE] = 1;
      d[k + D.K_FEATHER] = 0;
      d[k + D.K_FEATHER_AT] = 0;
    },
    featherEngine(index) {
      d[engineAt(index) + D.K_FEATHER] = 1;
    },
    setLever(index, position, overS) {
      requireFiniteNumber(position, 'lever position');
      requireFiniteNumber(overS, 'lever time');
      const t = now();
      for (let i = 0; i < engineCount; i++) {
        if (index !== 'all' && index !== i) continue;
        const k = D.D_ENGINES + i * D.ENGINE_MEMORY;
        const from =
          d[k + D.K_LEVER_HELD] !== 0
            ? D.rampAt(d[k + D.K_LEVER_FROM], d[k + D.K_LEVER_TO], d[k + D.K_LEVER_T0], d[k + D.K_LEVER_T1], t)
            : d[k + D.K_LEVER_PILOT];
        d[k + D.K_LEVER_HELD] = 1;
        d[k + D.K_LEVER_FROM] = from;
        d[k + D.K_LEVER_TO] = Math.min(Math.max(position, 0), 1);
        d[k + D.K_LEVER_T0] = t;
        d[k + D.K_LEVER_T1] = t + Math.max(overS, 0);
      }
      if (index !== 'all') engineAt(index);
    },
    addGust(gust) {
      addGustTo(d, gust, now(), x[X.X_DISTANCE]);
    },
    changeWind(windFromRad, windMps, overS) {
      requireFiniteNumber(windFromRad, 'wind direction');
      requireFiniteNumber(windMps, 'wind speed');
      requireFiniteNumber(overS, 'wind change time');
      const t = now();
      const t0 = d[D.D_WIND_T0];
      const t1 = d[D.D_WIND_T1];
      d[D.D_WIND_FROM_N] = D.rampAt(d[D.D_WIND_FROM_N], d[D.D_WIND_TO_N], t0, t1, t);
      d[D.D_WIND_FROM_E] = D.rampAt(d[D.D_WIND_FROM_E], d[D.D_WIND_TO_E], t0, t1, t);
      d[D.D_WIND_TO_N] = -windMps * cos(windFromRad);
      d[D.D_WIND_TO_E] = -windMps * sin(windFromRad);
      d[D.D_WIND_T0] = t;
      d[D.D_WIND_T1] = t + Math.max(overS, SHORTEST_WIND_CHANGE_S);
    },
    setTurbulence(level, overS) {
      requireFiniteNumber(overS, 'turbulence time');
      const t = now();
      const t0 = d[D.D_TURB_T0];
      const t1 = d[D.D_TURB_T1];
      d[D.D_TURB_FROM_W20] = D.rampAt(d[D.D_TURB_FROM_W20], d[D.D_TURB_TO_W20], t0, t1, t);
      d[D.D_TURB_FROM_HIGH] = D.rampAt(d[D.D_TURB_FROM_HIGH], d[D.D_TURB_TO_HIGH], t0, t1, t);
      d[D.D_TURB_TO_W20] = TURBULENCE_LEVELS[level].w20Mps;
      d[D.D_TURB_TO_HIGH] = TURBULENCE_LEVELS[level].highMps;
      d[D.D_TURB_T0] = t;
      d[D.D_TURB_T1] = t + Math.max(overS, 0);
    },
    jamRudder(rad) {
      jam(D.D_RUDDER_FAULT, D.D_RUDDER_AT, X.X_RUDDER, controls.rudderMaxRad, rad);
    },
    jamAileron(rad) {
      jam(D.D_AILERON_FAULT, D.D_AILERON_AT, X.X_AILERON, controls.aileronMaxRad, rad);
    },
    hardoverRudder(toCockpitSide) {
      d[D.D_RUDDER_FAULT] = 2;
      d[D.D_RUDDER_AT] = pedalToRudderRad(toCockpitSide, controls.rudderMaxRad);
    },
    halveAileron() {
      d[D.D_AILERON_EFFECT] = 0.5;
    },
    restoreControls() {
      d[D.D_RUDDER_FAULT] = 0;
      d[D.D_AILERON_FAULT] = 0;
      d[D.D_AILERON_EFFECT] = 1;
    },
    setRudderTrim(rad, overS) {
      requireFiniteNumber(rad, 'rudder trim');
      requireFiniteNumber(overS, 'rudder trim time');
      const t = now();
      // The event sets the whole trim: what the pilot has trimmed so far is taken off its target.
      const pilot = pedalToRudderRad(Math.min(Math.max(inputs.rudderTrim, -1), 1), controls.rudderMaxRad);
      d[D.D_TRIM_FROM] = D.rampAt(d[D.D_TRIM_FROM], d[D.D_TRIM_TO], d[D.D_TRIM_T0], d[D.D_TRIM_T1], t);
      d[D.D_TRIM_TO] = rad - pilot;
      d[D.D_TRIM_T0] = t;
      d[D.D_TRIM_T1] = t + Math.max(overS, 0);
    },
    setYawDamper(on) {
      d[D.D_DAMPER_ON] = on ? 1 : 0;
    },
    setRudderRatio(state) {
      if (state === 'normal') d[D.D_RATIO_STATE] = 0;
      else {
        d[D.D_RATIO_AT] = d[D.D_RATIO_STATE] === 0 ? rudderRatioAt(controls.rudderRatio, h[T.H_EAS]) : h[T.H_RATIO];
        d[D.D_RATIO_STATE] = 1;
      }
    },
    setPitchMode(mode) {
      enterPitchMode(core, mode);
    },
    setConfiguration(name) {
      const index = configurations.findIndex(({ configuration }) => configuration === name);
      if (index < 0) {
        throw new ModelError('unknown-configuration', `there is no configuration "${name}"`, 'configuration');
      }
      if (now() - d[D.D_CONFIG_T0] < CONFIGURATION_CHANGE_S) d[D.D_CONFIG_NEXT] = index;
      else if (index !== d[D.D_CONFIG]) startConfiguration(d, index);
    },
  };
}
