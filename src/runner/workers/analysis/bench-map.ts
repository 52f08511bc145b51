/** Stability map over two derivatives, time response and frequency response of up to four revisions. */
import { prepareAircraft } from '#shared/model/aircraft.ts';
import { buildSmallDisturbance } from '#shared/model/small-disturbance.ts';
import { inputColumn, type LateralInput } from '#shared/analysis/lateral-system.ts';
import { timeResponse } from '#shared/analysis/responses.ts';
import type { InputShape } from '#shared/analysis/input-shapes.ts';
import { mapBoundaries, type MapBoundaries } from '#shared/analysis/map-boundaries.ts';
import { createCellJudge, stabilityMap } from '#shared/analysis/stability-map.ts';
import { frequencyResponse, transferFunction } from '#shared/analysis/transfer-functions.ts';
import { lateralModes, type Mode } from '#shared/analysis/modes.ts';
import { eigenvalues4Into } from '#shared/numerics/eigen4.ts';
import { uncertainFields } from '#shared/analysis/airframe-sampling.ts';
import { DEG } from '#shared/units/constants.ts';
import {
  prepareSubject,
  shiftedAirframe,
  DERIVATIVE_KEYS,
  type BenchCondition,
  type BenchSubject,
  type DerivativeKey,
  type PreparedSubject,
} from './bench-condition.ts';

export type MapInput = Exclude<LateralInput, 'yaw-moment' | 'roll-moment'>;
export interface MapPoint {
  label: string;
  x: number;
  y: number;
  sigmaX: number;
  sigmaY: number;
  modes: Mode[];
  /** Worst level of the modal criteria, as the map's; 4 is below Level 3. */
  level: number;
}
export interface MapRequest {
  kind: 'map';
  condition: BenchCondition;
  subjects: readonly BenchSubject[];
  axes: {
    x: DerivativeKey;
    y: DerivativeKey;
    xRange: readonly [number, number];
    yRange: readonly [number, number];
    /** Nodes along each axis, the ends of the range included. */
    nodes: number;
  };
  response: { input: MapInput; shape: InputShape; amplitudeDeg: number; durationS: number; endS: number };
  bode: { input: MapInput; output: 0 | 1 | 2 | 3 };
}
export interface MapPicture {
  problems: string[];
  /** Null when the first revision cannot be computed. */
  boundaries: MapBoundaries | null;
  /** What was added to the derivatives of the first point, per rad. */
  shifts: BenchCondition['shifts'];
  /** Points of the compared revisions in the plane, the first with the standard deviations of its sources. */
  points: MapPoint[];
  timeS: number[];
  responses: {
    label: string;
    input: number[];
    betaDeg: number[];
    phiDeg: number[];
    pDegS: number[];
    rDegS: number[];
  }[];
  omega: number[];
  bode: { label: string; magnitudeDb: number[]; phaseDeg: number[] }[];
  dutchOmega: number | null;
  klass: string;
  category: string;
}

export function mapPicture(request: MapRequest): MapPicture {
  const { condition, axes, response } = request;
  const problems: string[] = [];
  const ready: PreparedSubject[] = [];
  request.subjects.forEach((subject, i) => {
    try {
      ready.push(prepareSubject(subject, condition, i === 0));
    } catch (error) {
      problems.push(`${subject.label}: ${error instanceof Error ? error.message : 'could not be computed'}`);
    }
  });
  const lead = ready[0];
  const picture: MapPicture = {
    problems,
    boundaries: null,
    shifts: condition.shifts,
    points: [],
    timeS: [],
    responses: [],
    omega: [],
    bode: [],
    dutchOmega: null,
    klass: lead?.klass ?? '',
    category: lead?.category ?? '',
  };
  if (!lead) return picture;
  fillMap(picture, request, lead);
  picture.points = ready.map((r) => pointOf(r, axes));
  for (const r of ready) {
    const out = timeResponse(r.system, {
      input: response.input,
      signal: { shape: response.shape, amplitude: amplitudeSI(response), startS: 0.5, durationS: response.durationS },
      endS: response.endS,
      points: 241,
      actuator:
        response.input === 'aileron'
          ? {
              lagS: r.aircraft.controls.lagS,
              rateRadS: r.aircraft.controls.aileronRateRadS,
              maxRad: r.aircraft.controls.aileronMaxRad,
            }
          : response.input === 'rudder'
            ? {
                lagS: r.aircraft.controls.lagS,
                rateRadS: r.aircraft.controls.rudderRateRadS,
                maxRad: r.aircraft.controls.rudderMaxRad,
              }
            : undefined,
      damper:
        condition.yawDamper && r.aircraft.yawDamper
          ? { gainS: r.aircraft.yawDamper.gainS, washoutS: r.aircraft.yawDamper.washoutS }
          : undefined,
      tolerance: 1e-7,
    });
    const deg = (values: Float64Array): number[] => Array.from(values, (v) => v / DEG);
    picture.timeS = Array.from(out.timeS);
    picture.responses.push({
      label: r.label,
      input: response.input === 'side-gust' ? Array.from(out.input) : deg(out.input),
      betaDeg: deg(out.betaRad),
      phiDeg: deg(out.phiRad),
      pDegS: deg(out.pRadS),
      rDegS: deg(out.rRadS),
    });
    try {
      const h = transferFunction(r.system.A, inputColumn(r.system, request.bode.input), request.bode.output, 4);
      const points = frequencyResponse(h, 0.05, 20, 121);
      picture.omega = points.map((p) => p.omegaRadS);
      picture.bode.push({
        label: r.label,
        magnitudeDb: points.map((p) => p.decibel),
        phaseDeg: points.map((p) => p.phaseDeg),
      });
    } catch (error) {
      problems.push(`${r.label}: ${error instanceof Error ? error.message : 'no frequency response'}`);
    }
  }
  picture.dutchOmega = lateralModes(lead.system.A).modes.find((m) => m.kind === 'dutch-roll')?.wn ?? null;
  return picture;
}

/** A side gust is given in m/s, all else in degrees or degrees per second. */
function amplitudeSI(response: MapRequest['response']): number {
  return response.input === 'side-gust' ? response.amplitudeDeg : response.amplitudeDeg * DEG;
}

function fillMap(picture: MapPicture, request: MapRequest, lead: PreparedSubject): void {
  const { axes, condition } = request;
  const nodes = ([lo, hi]: readonly [number, number]): number[] =>
    Array.from({ length: axes.nodes }, (_, i) => lo + ((hi - lo) * i) / (axes.nodes - 1));
  // The matrix is linear in any one derivative, and bilinear in two that act on different rows or columns; the two
  // directions are taken as differences about the origin of both.
  const subject = request.subjects[0];
  if (!subject) return;
  const matrixAt = (x: number, y: number): Float64Array => {
    const here = derivativesAt(lead);
    const shifts = { ...condition.shifts };
    shifts[axes.x] = (shifts[axes.x] ?? 0) + x - (here.get(axes.x) ?? 0);
    shifts[axes.y] = (shifts[axes.y] ?? 0) + y - (here.get(axes.y) ?? 0);
    const airframe = shiftedAirframe(subject.airframe, shifts);
    const aircraft = prepareAircraft(airframe, {
      configuration: lead.aircraft.configuration,
      loading: lead.aircraft.loading,
    });
    return buildSmallDisturbance(aircraft, { tasMps: condition.tasMps, heightM: condition.heightM }).A;
  };
  const base = matrixAt(0, 0);
  const alongX = matrixAt(1, 0).map((v, i) => v - (base[i] ?? 0));
  const alongY = matrixAt(0, 1).map((v, i) => v - (base[i] ?? 0));
  const system = { base, alongX, alongY };
  const map = stabilityMap(system, nodes(axes.xRange), nodes(axes.yRange), lead.klass, lead.category);
  picture.boundaries = mapBoundaries(system, map, lead.klass, lead.category);
}

function levelOf({ system, klass, category }: PreparedSubject): number {
  const one = {
    dutchZeta: new Float64Array(1),
    dutchOmega: new Float64Array(1),
    roll: new Float64Array(1),
    spiral: new Float64Array(1),
    growth: new Float64Array(1),
    level: new Uint8Array(1),
    pattern: new Uint8Array(1),
  };
  const roots = new Float64Array(8);
  eigenvalues4Into(roots, system.A);
  createCellJudge(klass, category)(one, 0, Float64Array.from(system.A), roots);
  return one.level[0] ?? 4;
}

function derivativesAt(ready: PreparedSubject): Map<DerivativeKey, number> {
  return new Map(DERIVATIVE_KEYS.map((key, i) => [key, ready.system.derivatives[i] ?? NaN]));
}

function pointOf(ready: PreparedSubject, axes: MapRequest['axes']): MapPoint {
  const values = derivativesAt(ready);
  const fields = uncertainFields(ready.airframe);
  const sigma = (key: DerivativeKey): number => {
    const configuration = ready.airframe.configurations.findIndex((c) => c.name === ready.aircraft.configuration);
    const pct = fields.find(
      (f) => f.field.startsWith(`/configurations/${configuration}/derivatives/`) && f.field.endsWith(`/${key}`),
    )?.uncertaintyPct;
    return pct === undefined ? 0 : (Math.abs(values.get(key) ?? 0) * pct) / 200;
  };
  return {
    label: ready.label,
    x: values.get(axes.x) ?? NaN,
    y: values.get(axes.y) ?? NaN,
    sigmaX: sigma(axes.x),
    sigmaY: sigma(axes.y),
    modes: lateralModes(ready.system.A).modes,
    level: levelOf(ready),
  };
}
