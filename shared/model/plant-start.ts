import { cos, exp, sin, tan } from '../numerics/elementary.ts';
import { packedDoubles } from '../numerics/packed-doubles.ts';
import { createStream } from '../numerics/random.ts';
import { DEG } from '../units/constants.ts';
import { createAirFlow } from './air.ts';
import { prepareAircraft, stabilityInertias } from './aircraft.ts';
import type { Aircraft } from './aircraft.ts';
import { tasFromCas } from './airspeeds.ts';
import { standardAtmosphere } from './atmosphere.ts';
import { DERIVATIVE_COUNT } from './derivatives.ts';
import { engineForces, rollArmM, steadyThrustN, yawArmM } from './engines.ts';
import { ModelError, requireFiniteNumber } from './errors.ts';
import { createLargeAngle } from './large-angle.ts';
import type { FlatRows } from './large-angle-work.ts';
import { createLinearMotion } from './linear-motion.ts';
import { CL_LOWEST } from './pitch-assistant.ts';
import type { Core } from './plant-core.ts';
import { enterPitchMode } from './plant-events.ts';
import * as D from './plant-memory.ts';
import { holdStartAtmosphere, prepareTick } from './plant-tick.ts';
import { TICK_S } from './plant-types.ts';
import type { PlantSetup } from './plant-types.ts';
import * as X from './state-layout.ts';
import * as T from './tick-held.ts';
import { createTrimSolution, createTrimSolver, trimStraight } from './trim.ts';
import { startTurbulence, TURBULENCE_LEVELS, turbulenceScaleInto } from './turbulence.ts';

/** Time before every run; marks ramps that are over. */
const LONG_AGO_S = -1e9;

/**
 * A plant's shared parts at the trimmed start.
 *
 * @param setup  Airframe, start, air, automation, seed; SI, rad.
 * @returns  The core at tick 0, ball-centred trim at the given levers.
 * @throws  {ModelError} that names what cannot be flown.
 * @sign  As this folder's README.
 * @source  Flight model, trim.
 */
export function createCore(setup: PlantSetup): Core {
  const { airframe, start } = setup;
  const options = { loading: setup.loading ?? null, dorsal: setup.automation.dorsalFin };
  const configurations = airframe.configurations.map(({ name }) =>
    prepareAircraft(airframe, { ...options, configuration: name }),
  );
  const first = setup.configuration ?? configurations[0].configuration;
  const index = configurations.findIndex(({ configuration }) => configuration === first);
  if (index < 0) prepareAircraft(airframe, { ...options, configuration: first });
  const aircraft = configurations[index];
  const n = aircraft.engines.length;
  checkSetup(setup, n);

  const tasMps = tasFromCas(start.casMps, start.heightM);
  const levers = Float64Array.from(start.levers, (lever) => Math.min(Math.max(lever, 0), 1));
  const running = aircraft.engines.map(() => 'running' as const);
  const forces = engineForces(aircraft, levers, running, tasMps, start.heightM);
  const trim = trimStraight(
    aircraft,
    {
      tasMps,
      heightM: start.heightM,
      thetaRad: start.pathRad,
      engineYawNm: forces.yawNm,
      engineRollNm: forces.rollNm,
    },
    { kind: 'ball-centred' },
  );
  checkTravel('rudder', trim.rudderRad, aircraft.controls.rudderMaxRad);
  checkTravel('aileron', trim.aileronRad, aircraft.controls.aileronMaxRad);

  const linear = setup.fidelity === 'small-disturbance';
  const { rows, ranges } = flatten(configurations);
  const x = new Float64Array(X.stateLength(n));
  const d = packedDoubles(D.memoryLength(n));
  const h = packedDoubles(T.HELD_LENGTH);
  const e = packedDoubles(n * T.ENGINE_STRIDE);
  const made = packedDoubles(T.MADE_LENGTH);
  const linearRow = new Float64Array(DERIVATIVE_COUNT);
  const groundM = setup.runway?.elevationM ?? 0;
  const air = createAirFlow(d, setup.air.profile, groundM);
  const core: Core = {
    setup,
    linear,
    configurations,
    rowRanges: ranges,
    engineCount: n,
    inertias: stabilityInertias(aircraft, trim.CL),
    groundM,
    x,
    d,
    h,
    e,
    made,
    linearRow,
    blendRow: new Float64Array(DERIVATIVE_COUNT),
    inputs: { stick: 0, pedal: 0, pitch: 0, rudderTrim: 0, levers: levers.slice(), feather: new Uint8Array(n) },
    stream: createStream(setup.seed, 'turbulence'),
    air,
    motion: linear ? createLinearMotion(h, e, n, air, made, linearRow) : createLargeAngle(h, e, n, rows, air, made),
    solver: createTrimSolver(),
    trim: createTrimSolution(),
    turbulence: { lateralLengthM: 0, verticalLengthM: 0, lateralSigmaMps: 0, verticalSigmaMps: 0 },
    startTrim: {
      aileronRad: trim.aileronRad,
      rudderRad: trim.rudderRad,
      betaRad: trim.betaRad,
      phiRad: trim.phiRad,
      CL: trim.CL,
    },
  };
  fillConstants(core, aircraft);
  startState(core, tasMps);
  startMemory(core, index, levers);
  if (linear) holdStartAtmosphere(core);
  prepareTick(core);
  const { sigma, soundMps } = standardAtmosphere(start.heightM);
  aircraft.engines.forEach((engine, i) => {
    x[X.X_THRUST + i] = steadyThrustN(engine, levers[i], tasMps, sigma, tasMps / soundMps);
  });
  return core;
}

function checkSetup({ start, runway, air, seed }: PlantSetup, n: number): void {
  const numbers: [number, string][] = [
    [start.casMps, 'start speed'],
    [start.heightM, 'start height'],
    [start.headingRad, 'start heading'],
    [start.pathRad, 'start path'],
    [air.windFromRad, 'wind direction'],
    [air.windMps, 'wind speed'],
    [seed, 'seed'],
  ];
  if (runway) for (const [name, value] of Object.entries(runway)) numbers.push([value, `runway ${name}`]);
  for (const [value, name] of numbers) requireFiniteNumber(value, name);
  if (!(start.casMps > 0)) {
    throw new ModelError('bad-argument', 'the start speed must be above 0', 'start speed');
  }
  if (!(Math.abs(start.pathRad) < 60 * DEG)) {
    throw new ModelError('bad-argument', 'the start path must lie within 60° of level', 'start path');
  }
  if (start.levers.length !== n) {
    throw new ModelError('wrong-engine-count', `${start.levers.length} levers for ${n} engines`, 'levers');
  }
  start.levers.forEach((lever, i) => requireFiniteNumber(lever, `lever ${i + 1}`));
}

function checkTravel(surface: string, neededRad: number, maxRad: number): void {
  if (Math.abs(neededRad) <= maxRad) return;
  const degrees = (rad: number): string => (rad / DEG).toFixed(1);
  throw new ModelError(
    'trim-beyond-travel',
    `the start cannot be trimmed: it needs ${degrees(neededRad)}° of ${surface}, the travel is ${degrees(maxRad)}°`,
    surface,
  );
}

function flatten(configurations: readonly Aircraft[]): { rows: FlatRows; ranges: [number, number][] } {
  const tables = configurations.map(({ derivatives }) => derivatives);
  const total = tables.reduce((sum, { CL }) => sum + CL.length, 0);
  const rows = {
    CL: packedDoubles(total),
    values: packedDoubles(total * DERIVATIVE_COUNT),
    slopes: packedDoubles(total * DERIVATIVE_COUNT),
  };
  const ranges: [number, number][] = [];
  let at = 0;
  for (const table of tables) {
    table.CL.forEach((CL, i) => (rows.CL[at + i] = CL));
    table.values.forEach((value, i) => (rows.values[at * DERIVATIVE_COUNT + i] = value));
    table.slopes.forEach((slope, i) => (rows.slopes[at * DERIVATIVE_COUNT + i] = slope));
    ranges.push([at, at + table.CL.length - 1]);
    at += table.CL.length;
  }
  return { rows, ranges };
}

function fillConstants({ h, e, inertias, setup, startTrim }: Core, aircraft: Aircraft): void {
  const { Ixx, Izz, Ixz } = inertias;
  const det = Ixx * Izz - Ixz * Ixz;
  h[T.H_CONFIG_HELD] = -1;
  h[T.H_AREA] = aircraft.wingAreaM2;
  h[T.H_SPAN] = aircraft.spanM;
  h[T.H_MASS] = aircraft.massKg;
  h[T.H_INV_ROLL] = Izz / det;
  h[T.H_INV_BOTH] = Ixz / det;
  h[T.H_INV_YAW] = Ixx / det;
  h[T.H_IZZ_IYY] = Izz - aircraft.Iyy;
  h[T.H_IYY_IXX] = aircraft.Iyy - Ixx;
  h[T.H_IXZ] = Ixz;
  h[T.H_CL_TRIM] = startTrim.CL;
  h[T.H_CL_LOWEST] = CL_LOWEST;
  h[T.H_AILERON_RATE] = aircraft.controls.aileronRateRadS;
  h[T.H_RUDDER_RATE] = aircraft.controls.rudderRateRadS;
  h[T.H_INV_WASHOUT] = aircraft.yawDamper ? 1 / aircraft.yawDamper.washoutS : 0;
  h[T.H_INV_LAG] = 1 / aircraft.controls.lagS;
  h[T.H_DECAY_HALF] = exp((-0.5 * TICK_S) / aircraft.controls.lagS);
  h[T.H_DECAY_FULL] = exp(-TICK_S / aircraft.controls.lagS);
  h[T.H_HAS_JET] = aircraft.engines.some(({ kind }) => kind === 'jet') ? 1 : 0;
  h[T.H_COS_PATH] = cos(setup.start.pathRad);
  h[T.H_SIN_PATH] = sin(setup.start.pathRad);
  h[T.H_TAN_PATH] = tan(setup.start.pathRad);
  const fin = aircraft.fin;
  if (fin) {
    h[T.H_HAS_FIN] = 1;
    h[T.H_FIN_SLOPE] = (fin.areaM2 / aircraft.wingAreaM2) * fin.liftSlopePerRad;
    h[T.H_FIN_BETA] = 1 - fin.sidewash;
    h[T.H_FIN_HEIGHT] = fin.heightM;
    h[T.H_FIN_ARM] = fin.armM;
    h[T.H_FIN_TAU] = fin.rudderTau;
    h[T.H_FIN_STALL] = fin.stallAngleRad;
    h[T.H_FIN_DROP] = fin.stallDrop;
  }
  aircraft.engines.forEach((engine, i) => {
    const at = i * T.ENGINE_STRIDE;
    const knee = engine.powerW / engine.staticThrustN;
    e[at + T.E_BASE] = engine.kind === 'jet' ? engine.staticThrustN : engine.powerW;
    e[at + T.E_KNEE2] = engine.kind === 'jet' ? -1 : knee * knee;
    e[at + T.E_YAW_ARM] = yawArmM(engine);
    e[at + T.E_ROLL_ARM] = rollArmM(engine);
    e[at + T.E_Y] = engine.yM;
    e[at + T.E_INV_DOWN] = 1 / engine.spoolDownS;
    e[at + T.E_INV_UP] = 1 / engine.spoolUpS;
  });
}

function startState({ x, setup, startTrim }: Core, tasMps: number): void {
  const { start } = setup;
  x[X.X_BETA] = startTrim.betaRad;
  x[X.X_PHI] = startTrim.phiRad;
  x[X.X_THETA] = start.pathRad;
  x[X.X_PSI] = start.headingRad;
  x[X.X_V] = tasMps;
  x[X.X_HEIGHT] = start.heightM;
  x[X.X_AILERON] = startTrim.aileronRad;
  x[X.X_RUDDER] = startTrim.rudderRad;
}

function startMemory(core: Core, configuration: number, levers: Float64Array): void {
  const { d, setup, startTrim, turbulence, stream, x, groundM } = core;
  const { air, automation } = setup;
  const aircraft = core.configurations[configuration];
  d[D.D_CONFIG] = configuration;
  d[D.D_CONFIG_OLD] = configuration;
  d[D.D_CONFIG_T0] = LONG_AGO_S;
  d[D.D_CONFIG_NEXT] = -1;
  d[D.D_TRIM_TO] = startTrim.rudderRad;
  d[D.D_TRIM_T0] = LONG_AGO_S;
  d[D.D_TRIM_T1] = LONG_AGO_S;
  d[D.D_AILERON_EFFECT] = 1;
  d[D.D_DAMPER_ON] = automation.yawDamper && aircraft.yawDamper ? 1 : 0;
  d[D.D_RATIO_STATE] = automation.rudderRatio ? 0 : 2;
  d[D.D_WIND_TO_N] = -air.windMps * cos(air.windFromRad);
  d[D.D_WIND_TO_E] = -air.windMps * sin(air.windFromRad);
  d[D.D_WIND_T0] = LONG_AGO_S;
  d[D.D_WIND_T1] = LONG_AGO_S;
  const level = TURBULENCE_LEVELS[air.turbulence];
  d[D.D_TURB_TO_W20] = level.w20Mps;
  d[D.D_TURB_TO_HIGH] = level.highMps;
  d[D.D_TURB_T0] = LONG_AGO_S;
  d[D.D_TURB_T1] = LONG_AGO_S;
  turbulenceScaleInto(turbulence, level.w20Mps, level.highMps, x[X.X_HEIGHT] - groundM);
  startTurbulence(d, D.D_TURB_X1, stream, x[X.X_V], turbulence.lateralLengthM, aircraft.spanM);
  for (let i = 0; i < core.engineCount; i++) {
    const k = D.D_ENGINES + i * D.ENGINE_MEMORY;
    d[k + D.K_SHARE] = 1;
    d[k + D.K_LEVER_PILOT] = levers[i];
  }
  enterPitchMode(core, automation.pitch);
}
