import type { Airframe } from '../../model/airframe-schema.ts';
import { prepareAircraft, stallTasMps } from '../../model/aircraft.ts';
import type { Aircraft } from '../../model/aircraft.ts';
import { densityAt } from '../../model/atmosphere.ts';
import { pedalRudderLimitRad } from '../../model/controls.ts';
import { engineForces } from '../../model/engines.ts';
import { buildSmallDisturbance } from '../../model/small-disturbance.ts';
import type { SmallDisturbance } from '../../model/small-disturbance.ts';
import { NumericsError } from '../../numerics/errors.ts';
import { DEG, KT } from '../../units/constants.ts';
import { finContributions } from '../geometry-estimates.ts';
import type { FinDerivatives } from '../geometry-estimates.ts';
import type { LateralInput } from '../lateral-system.ts';
import { parameterValue, withParameter } from '../parameters.ts';
import type { DerivativeName } from '../parameters.ts';
import { timeResponse } from '../responses.ts';
import type { TimeResponse } from '../responses.ts';
import { steadySideslips } from '../sideslip-crosswind.ts';
import { createStaticSolver } from '../static-solution.ts';
import { facts, shown } from './case-builders.ts';
import type { FactRow } from './case-builders.ts';
import { modeOfKind } from './modes-helpers.ts';
import type { PublishedCase } from './published-case.ts';

/** The shipped airframes, parsed, by slug. */
export type ShippedAirframes = Readonly<Record<ShippedSlug, Airframe>>;
export type ShippedSlug = 'light-twin' | 'commuter-turboprop' | 'twin-jet' | 'four-jet' | 'single-trainer';

/** Speed of the dynamic facts as a multiple of the stall speed. */
const SPEED = 1.3;
const LEFT = 0;
const AFTER_CUT = { lever: 1, failed: [LEFT], feathered: false } as const;

interface Subject {
  aircraft: Aircraft;
  tasMps: number;
  system: SmallDisturbance;
}

function subjectOf(airframe: Airframe, change?: { name: DerivativeName; factor: number }): Subject {
  const aircraft = prepareAircraft(airframe);
  const tasMps = SPEED * stallTasMps(aircraft, densityAt(0));
  const condition = { tasMps, heightM: 0 };
  if (!change) return { aircraft, tasMps, system: buildSmallDisturbance(aircraft, condition) };
  const value = change.factor * parameterValue(aircraft, condition, change.name);
  const changed = withParameter(aircraft, condition, change.name, value).aircraft;
  return { aircraft: changed, tasMps, system: buildSmallDisturbance(changed, condition) };
}

function respond(system: SmallDisturbance, input: LateralInput, amplitude: number, endS: number): TimeResponse {
  const signal = { shape: 'step', amplitude, startS: 0, durationS: 1 } as const;
  return timeResponse(system, { input, signal, endS, points: Math.round(endS * 50) + 1 });
}

/** Value of a series at a time; s. */
function at(response: TimeResponse, series: Float64Array, seconds: number): number {
  return series[Math.round((seconds / response.timeS[response.timeS.length - 1]) * (series.length - 1))];
}

/** Linear response to a cut of the left engine: a step of its yawing moment. */
function cutLeft(subject: Subject): TimeResponse {
  const solver = createStaticSolver(subject.aircraft, { heightM: 0, engines: AFTER_CUT });
  solver.loadEngines(subject.tasMps);
  return respond(subject.system, 'yaw-moment', solver.yawMomentNm, 10);
}

const degrees = (rad: number) => `${shown(rad / DEG)}°`;

function propulsionFacts({ 'single-trainer': trainer, 'light-twin': twin }: ShippedAirframes): FactRow[] {
  return [
    [
      'propeller-yaw',
      'Propeller',
      'A clockwise propeller yaws the aeroplane left',
      () => {
        const { aircraft, tasMps } = subjectOf(trainer);
        const { yawNm } = engineForces(aircraft, [1], ['running'], tasMps, 0);
        return { holds: yawNm < 0, shown: `${shown(yawNm)} N·m (right positive)` };
      },
    ],
    [
      'cut-yaws-then-rolls',
      'Engine cut',
      'A cut of the left engine yaws, then rolls left, and uncorrected ends in a spiral to the left',
      () => {
        const response = cutLeft(subjectOf(twin));
        const yawEarly = at(response, response.rRadS, 0.3);
        const bankEarly = at(response, response.phiRad, 0.3);
        const [bank5, bank10] = [5, 10].map((s) => at(response, response.phiRad, s));
        const heading = at(response, response.psiRad, 10);
        const yawFirst = yawEarly < 0 && Math.abs(yawEarly * 0.3) > 2 * Math.abs(bankEarly);
        const holds = yawFirst && bank5 < 0 && bank10 < bank5 && heading < 0;
        return {
          holds,
          shown: `bank ${degrees(bank5)} after 5 s, ${degrees(bank10)} after 10 s, without large-angle effects`,
        };
      },
    ],
    [
      'pedal-stops-it',
      'Engine cut',
      'Pedal toward the live engine holds straight flight',
      () => {
        const { aircraft, tasMps } = subjectOf(twin);
        const solver = createStaticSolver(aircraft, { heightM: 0, engines: AFTER_CUT });
        const solved = solver.solveAtBank(tasMps, 5 * DEG) && solver.largestUse <= 1;
        return {
          holds: solved && solver.at.rudderRad < 0,
          shown: `rudder ${degrees(solver.at.rudderRad)} (yaws right negative)`,
        };
      },
    ],
    [
      'dihedral-hastens-roll',
      'Engine cut',
      'More dihedral effect hastens the roll that follows',
      () => {
        const plain = cutLeft(subjectOf(twin));
        const more = cutLeft(subjectOf(twin, { name: 'Cl_beta', factor: 1.5 }));
        const [a, b] = [plain, more].map((response) => at(response, response.phiRad, 3));
        return { holds: b < a && a < 0, shown: `bank after 3 s ${degrees(a)}, with half as much again ${degrees(b)}` };
      },
    ],
    [
      'zero-sideslip-bank',
      'Engine out',
      'Zero sideslip asks two to four degrees of bank toward the live engine',
      () => {
        const { aircraft, tasMps } = subjectOf(twin);
        const solver = createStaticSolver(aircraft, { heightM: 0, engines: AFTER_CUT });
        const solved = solver.solveAtSideslip(tasMps, 0);
        const bank = solver.at.phiRad / DEG;
        return { holds: solved && bank >= 2 && bank <= 4, shown: `${shown(bank)}°` };
      },
    ],
  ];
}

function controlFacts({ 'single-trainer': trainer, 'light-twin': twin, 'twin-jet': jet }: ShippedAirframes): FactRow[] {
  return [
    [
      'adverse-yaw',
      'Aileron',
      'Right aileron yaws the nose left at first',
      () => {
        const { system } = subjectOf(trainer);
        const response = respond(system, 'aileron', 10 * DEG, 4);
        const yaw = at(response, response.rRadS, 0.2);
        return { holds: yaw < 0, shown: `${degrees(yaw)}/s after 0.2 s of 10° right aileron` };
      },
    ],
    [
      'yaw-rolls',
      'Coupling',
      "A turning aeroplane's faster wing lifts more, so yaw to the right rolls right",
      () => {
        const { system } = subjectOf(twin);
        return { holds: system.A[6] > 0, shown: `L'_r ${shown(system.A[6])} 1/s` };
      },
    ],
    [
      'rudder-first-roll',
      'Rudder',
      'A rudder above the centre of gravity first rolls the aeroplane away from the yaw',
      () => {
        const { system } = subjectOf(twin);
        const response = respond(system, 'rudder', -5 * DEG, 2);
        const [roll, yaw] = [response.pRadS, response.rRadS].map((series) => at(response, series, 0.1));
        return {
          holds: roll < 0 && yaw > 0,
          shown: `right pedal: roll ${degrees(roll)}/s, yaw ${degrees(yaw)}/s after 0.1 s`,
        };
      },
    ],
    [
      'held-rudder',
      'Rudder',
      'A held rudder holds a steady sideslip, more rudder more of it',
      () => {
        const { aircraft, tasMps } = subjectOf(twin);
        const points = steadySideslips(aircraft, tasMps, 0, [4 * DEG, 8 * DEG]);
        const [a, b] = points.map((point) => point?.rudderRad ?? NaN);
        return { holds: a > 0 && b > a, shown: `${degrees(a)} of rudder at 4°, ${degrees(b)} at 8°` };
      },
    ],
    [
      'neutral-returns',
      'Rudder',
      'Neutral pedals bring the nose back into the wind',
      () => {
        const { system } = subjectOf(twin);
        const signal = { shape: 'step', amplitude: 0, startS: 0, durationS: 1 } as const;
        const response = timeResponse(system, {
          input: 'rudder',
          signal,
          endS: 6,
          points: 301,
          initial: [8 * DEG, 0, 0, 0],
        });
        const yaw = at(response, response.rRadS, 0.3);
        const left = Math.abs(at(response, response.betaRad, 6));
        return { holds: yaw > 0 && left < 2 * DEG, shown: `of 8° of sideslip ${degrees(left)} are left after 6 s` };
      },
    ],
    [
      'ratio-changer',
      'Rudder ratio',
      'Full rudder travel up to 160 kt, in inverse proportion above',
      () => {
        const { controls } = prepareAircraft(jet);
        const available = [100, 160, 200, 320].map((kt) =>
          pedalRudderLimitRad({ ...controls, pedalForce: null }, kt * KT),
        );
        const wanted = [1, 1, 0.8, 0.5].map((k) => k * controls.rudderMaxRad);
        const holds = available.every((rad, i) => Math.abs(rad - wanted[i]) < 1e-9);
        return { holds, shown: available.map(degrees).join(', ') };
      },
    ],
  ];
}

/** The fin's share of the derivatives that it feeds, enlarged by a fifth. */
const FIN_PARTS: readonly (readonly [DerivativeName, keyof FinDerivatives])[] = [
  ['CY_beta', 'CY_beta'],
  ['Cl_beta', 'Cl_beta'],
  ['Cn_beta', 'Cn_beta'],
  ['CY_r', 'CY_r'],
  ['Cl_r', 'Cl_r'],
  ['Cn_r', 'Cn_r'],
  ['CY_p', 'CY_p'],
  ['Cl_p', 'Cl_p'],
  ['Cn_p', 'Cn_p'],
];
const LARGER = 0.2;

function finFacts({ 'light-twin': twin }: ShippedAirframes): FactRow[] {
  return [
    [
      'larger-fin',
      'Fin',
      'A larger fin makes the spiral less stable and the Dutch roll faster',
      () => {
        const { aircraft, tasMps, system } = subjectOf(twin);
        const { fin } = aircraft;
        if (!fin) throw new NumericsError('bad-argument', 'the airframe has no fin data');
        const slope = (-fin.liftSlopePerRad * (1 - fin.sidewash) * fin.areaM2) / aircraft.wingAreaM2;
        const part = finContributions(slope, fin.armM, fin.heightM, aircraft.spanM, 0);
        const condition = { tasMps, heightM: 0 };
        let larger = aircraft;
        for (const [name, source] of FIN_PARTS) {
          const value = parameterValue(larger, condition, name) + LARGER * part[source];
          larger = withParameter(larger, condition, name, value).aircraft;
        }
        const after = buildSmallDisturbance(larger, condition).A;
        const spiral = [system.A, after].map((a) => modeOfKind(a, 'spiral').re);
        const omega = [system.A, after].map((a) => modeOfKind(a, 'dutch-roll').wn ?? NaN);
        const holds = spiral[1] > spiral[0] && omega[1] > omega[0];
        return { holds, shown: `spiral ${spiral.map(shown).join(' → ')} 1/s, ω ${omega.map(shown).join(' → ')} rad/s` };
      },
    ],
  ];
}

/** Facts that any instructor would check, on the shipped airframes: signs and order, not sizes. */
export function practiceCases(airframes: ShippedAirframes): PublishedCase[] {
  const group = 'Common practice: signs and order';
  const source = 'common practice; on the shipped airframes, which are invented';
  return facts({ group, source, provenance: 'common practice' }, [
    ...propulsionFacts(airframes),
    ...controlFacts(airframes),
    ...finFacts(airframes),
  ]);
}
