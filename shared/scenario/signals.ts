/**
 * What triggers, measures and instruments read at one tick. Plain states come straight from the plant; everything that
 * needs an evaluation of the model (`full`) is computed at most once a tick and only when something asks for it.
 *
 * A value comes by one way only, whoever else looks: a run gives the same bits with and without a screen attached.
 */
import { criticalEngine } from '../analysis/critical-engine.ts';
import { stallTasMps } from '../model/aircraft.ts';
import { casFromTas, casInAir } from '../model/airspeeds.ts';
import { densityAt, densityNear, GAS_CONSTANT, HEAT_RATIO, temperatureK, TROPOPAUSE_M } from '../model/atmosphere.ts';
import { createObservation } from '../model/plant.ts';
import { TICK_S } from '../model/plant-types.ts';
import type { Observation, Plant } from '../model/plant-types.ts';
import * as X from '../model/state-layout.ts';
import { cos, sin } from '../numerics/elementary.ts';
import { wrap2Pi, wrapPi } from '../units/angles.ts';
import type { EngineBook } from './engine-book.ts';
import { MADE_COUNT, MADE_SIGNAL as V } from './expression/names.ts';
import type { ExpressionInputs, SignalName } from './expression/names.ts';
import type { EndReason } from './run-types.ts';

/** Thickness of the layers about whose middles density is expanded; m. */
const LAYER_M = 40;

/** The line that track measures refer to: the runway's centre line, or the line of the start. */
export interface ReferenceLine {
  headingRad: number;
  northM: number;
  eastM: number;
}

export class Signals implements ExpressionInputs {
  readonly plant: Plant;
  readonly engines: EngineBook;
  readonly x: Float64Array;
  readonly v = new Float64Array(MADE_COUNT);
  readonly startCasMps: number;
  tick = 0;
  /** Set when the run has ended and the last state is looked at. */
  ended: EndReason | null = null;
  private readonly line: ReferenceLine;
  private readonly lineSin: number;
  private readonly lineCos: number;
  private readonly groundM: number;
  private readonly startPsiRad: number;
  private readonly firedTickOf: (id: string) => number;
  private readonly observation: Observation;
  private observedTick = -1;
  private needsCas = false;
  private needsBall = false;
  private needsPlace = false;
  private readonly linear: boolean;
  private layerM = NaN;
  private layerDensity = 0;

  constructor(plant: Plant, engines: EngineBook, line: ReferenceLine, firedTickOf: (id: string) => number) {
    this.plant = plant;
    this.engines = engines;
    this.line = line;
    this.lineSin = sin(line.headingRad);
    this.lineCos = cos(line.headingRad);
    this.firedTickOf = firedTickOf;
    this.x = plant.x;
    this.linear = plant.setup.fidelity === 'small-disturbance';
    this.groundM = plant.setup.runway?.elevationM ?? 0;
    this.observation = createObservation(plant.engineCount);
    this.startPsiRad = this.x[X.X_PSI];
    this.startCasMps = this.casMps;
    this.v[V.vmcMps] = NaN;
    this.v[V.stallMps] = NaN;
  }

  /** Says that somebody will read these signals. */
  need(names: readonly SignalName[]): void {
    for (const name of names) {
      if (name === 'casMps') this.needsCas = true;
      else if (name === 'ballWidths') this.needsBall = true;
      else if (name === 'vmcMps' || name === 'stallMps') this.computeLimits();
      else if (name === 'heightAboveRunwayM' || name === 'headingRad' || name === 'turnedRad') this.needsPlace = true;
    }
  }

  /** The state has moved on: what was worked out for another one is forgotten. */
  moved(): void {
    this.tick = this.plant.tick | 0;
    this.observedTick = -1;
  }

  /** Takes in state and inputs of the present tick. */
  take(): void {
    this.moved();
    const { v, x } = this;
    const { inputs } = this.plant;
    v[V.timeS] = this.tick * TICK_S;
    v[V.pedal] = inputs.pedal;
    v[V.stick] = inputs.stick;
    if (this.needsPlace) {
      v[V.heightAboveRunwayM] = x[X.X_HEIGHT] - this.groundM;
      v[V.headingRad] = wrap2Pi(x[X.X_PSI]);
      v[V.turnedRad] = x[X.X_PSI] - this.startPsiRad;
    }
    if (this.needsCas) v[V.casMps] = this.casMps;
    if (this.needsBall) v[V.ballWidths] = this.full().ballWidths;
  }

  /** The whole observation of this tick. */
  full(): Observation {
    if (this.observedTick !== this.tick) {
      this.plant.observeInto(this.observation);
      this.observedTick = this.tick;
    }
    return this.observation;
  }

  get timeS(): number {
    return this.tick * TICK_S;
  }
  get heightAboveRunwayM(): number {
    return this.x[X.X_HEIGHT] - this.groundM;
  }
  get thetaRad(): number {
    return this.x[X.X_THETA];
  }
  get tasMps(): number {
    return this.x[X.X_V];
  }

  /** Calibrated airspeed. Density comes from a series about the middle of the layer, which depends on the height alone. */
  get casMps(): number {
    const height = this.linear ? this.plant.setup.start.heightM : this.x[X.X_HEIGHT];
    const middle = (Math.floor(height / LAYER_M) + 0.5) * LAYER_M;
    if (middle !== this.layerM) {
      this.layerM = middle;
      this.layerDensity = densityAt(middle);
    }
    const low = middle < TROPOPAUSE_M;
    const density = densityNear(height - middle, this.layerDensity, temperatureK(middle), low);
    const temperature = temperatureK(height);
    const pressure = density * GAS_CONSTANT * temperature;
    return casInAir(this.x[X.X_V], pressure, Math.sqrt(HEAT_RATIO * GAS_CONSTANT * temperature));
  }

  sinceS(id: string): number {
    const fired = this.firedTickOf(id);
    return fired < 0 ? NaN : (this.tick - fired) * TICK_S;
  }

  /** Angle from the reference line to the ground track, right positive; rad. */
  get trackErrorRad(): number {
    return wrapPi(this.full().trackRad - this.line.headingRad);
  }
  /** Distance from the reference line, right positive; m. */
  get trackOffsetM(): number {
    const north = this.x[X.X_NORTH] - this.line.northM;
    const east = this.x[X.X_EAST] - this.line.eastM;
    return east * this.lineCos - north * this.lineSin;
  }
  /** Ground speed across the reference line, right positive; m/s. */
  get acrossMps(): number {
    return this.full().groundSpeedMps * sin(this.trackErrorRad);
  }

  /** Computed minimum control speed (critical engine, bank up to 5°, full lever) and 1 g stall speed at the start. */
  private computeLimits(): void {
    const { v } = this;
    if (!Number.isNaN(v[V.stallMps])) return;
    const { heightM } = this.plant.setup.start;
    const aircraft = this.engines.startAircraft;
    v[V.stallMps] = casFromTas(stallTasMps(aircraft, densityAt(heightM)), heightM);
    if (aircraft.engines.length < 2) return;
    const critical = criticalEngine(aircraft, { heightM });
    const result = critical.results[critical.index];
    if (result.found) v[V.vmcMps] = result.casMps;
  }
}
