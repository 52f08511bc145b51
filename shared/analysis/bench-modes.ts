/** Modes, criteria, roots and mode shapes of up to four revisions at one condition, with the locus of a sweep. */
import { casFromTas } from '../model/airspeeds.ts';
import { ModelError } from '../model/errors.ts';
import { NumericsError } from '../numerics/errors.ts';
import { densityAt } from '../model/atmosphere.ts';
import { classicalApproximations, type ClassicalApproximations } from './approximations.ts';
import { modalCriteria, type CriterionResult } from './criteria-8785c.ts';
import { withYawDamper } from './lateral-system.ts';
import { modeShapes, type ModeShape } from './mode-shapes.ts';
import { lateralModes, type LateralModes } from './modes.ts';
import { rollOscillationCriterion, timeToBankCriterion } from './roll-performance.ts';
import { sideslipCriterion } from './sideslip-crosswind.ts';
import { sPlaneBoundaries, type SPlaneBoundary } from './s-plane-regions.ts';
import { rollModeMaxima } from './criteria-tables.ts';
import { KT } from '../units/constants.ts';
import {
  prepareSubject,
  stallKt,
  type BenchCondition,
  type BenchSubject,
  type DerivativeKey,
  type PreparedSubject,
} from './bench-condition.ts';

export type SweepKind = 'speed' | 'height' | DerivativeKey;
export interface ModesRequest {
  kind: 'modes';
  condition: BenchCondition;
  subjects: readonly BenchSubject[];
  sweep: { kind: SweepKind; values: readonly number[] };
}
export interface ModesOfSubject {
  label: string;
  found: LateralModes;
  shapes: ModeShape[];
  criteria: CriterionResult[];
  /** Worst modal level; 4 below Level 3. */
  level: number;
  CL: number;
  casKt: number;
  stallKt: number;
  klass: string;
  category: string;
  approximations: ClassicalApproximations;
  /** Values at the trimmed lift coefficient, in the order of DERIVATIVE_KEYS. */
  derivatives: number[];
}
export interface ModesPicture {
  subjects: ModesOfSubject[];
  problems: string[];
  locus: { value: number; roots: { re: number; im: number }[] }[];
  boundaries: SPlaneBoundary[];
  top: number;
  rollLimitS: number | null;
}

/**
 * Modes, criteria and mode shapes of up to four revisions at one condition, and the roots along a sweep of the first.
 *
 * @param request  Condition, revisions, swept quantity with its values (SI, derivatives as shifts per rad).
 * @returns        What the figures show; a revision that cannot be computed is named in `problems`.
 * @throws         Nothing that the model names: those become problems.
 * @sign           As `lateralModes`.
 * @source         Flight model, analysis.
 */
export function modesPicture(request: ModesRequest): ModesPicture {
  const { condition, subjects } = request;
  const problems: string[] = [];
  const done: ModesOfSubject[] = [];
  let first: PreparedSubject | null = null;
  subjects.forEach((subject, i) => {
    try {
      const ready = prepareSubject(subject, condition, i === 0);
      if (i === 0) first = ready;
      done.push(modesOf(ready, condition));
    } catch (error) {
      problems.push(`${subject.label}: ${error instanceof Error ? error.message : 'could not be computed'}`);
    }
  });
  const lead = first as PreparedSubject | null; // assigned in the loop above
  const locus = lead ? sweepRoots(request) : [];
  const top = Math.max(
    1,
    ...done.flatMap((d) => d.found.modes.map((m) => m.im * 1.25)),
    ...locus.flatMap((l) => l.roots.map((r) => r.im * 1.1)),
  );
  return {
    subjects: done,
    problems,
    locus,
    boundaries: lead ? sPlaneBoundaries(lead.klass, lead.category, top, null) : [],
    top,
    rollLimitS: lead ? rollModeMaxima(lead.klass, lead.category)[0] : null,
  };
}

function modesOf(ready: PreparedSubject, condition: BenchCondition): ModesOfSubject {
  const { aircraft, system } = ready;
  const damper = condition.yawDamper ? aircraft.yawDamper : null;
  const a = damper
    ? withYawDamper(system.A, system.B.rudder, { gainS: damper.gainS, washoutS: damper.washoutS })
    : system.A;
  const n = damper ? 5 : 4;
  const found = lateralModes(a, n);
  const sigma = densityAt(condition.heightM) / densityAt(0);
  const shapes = modeShapes(a, n, found, condition.tasMps, sigma);
  const dutch = shapes.find((s) => s.mode.kind === 'dutch-roll');
  const criteria = modalCriteria(found, dutch?.phiOverBeta ?? null, ready.klass, ready.category);
  const actuator = {
    lagS: aircraft.controls.lagS,
    rateRadS: aircraft.controls.aileronRateRadS,
    maxRad: aircraft.controls.aileronMaxRad,
  };
  const subject = { a, n: n as 4 | 5, column: system.B.aileron, rudder: system.B.rudder, aileron: actuator }; // 5 with the damper's washout
  const extra = [
    attempt(() => timeToBankCriterion(subject, ready.klass, ready.category, 'low')),
    attempt(() => rollOscillationCriterion(subject, ready.category)),
    attempt(() => sideslipCriterion(aircraft, condition.tasMps, condition.heightM)),
  ].filter((c) => c !== null);
  return {
    label: ready.label,
    found,
    shapes,
    criteria: [...criteria, ...extra],
    level: Math.max(1, ...criteria.map((c) => (typeof c.level === 'number' ? c.level : 1))),
    CL: system.CL,
    casKt: casFromTas(condition.tasMps, condition.heightM) / KT,
    stallKt: stallKt(aircraft, condition.heightM),
    klass: ready.klass,
    category: ready.category,
    approximations: classicalApproximations(system.A),
    derivatives: Array.from(system.derivatives),
  };
}

function attempt<T>(compute: () => T): T | null {
  try {
    return compute();
  } catch (error) {
    // A criterion that this data cannot answer is left out of the table.
    if (error instanceof ModelError || error instanceof NumericsError) return null;
    throw error;
  }
}

function sweepRoots(request: ModesRequest): ModesPicture['locus'] {
  const subject = request.subjects[0];
  if (!subject) return [];
  const out: ModesPicture['locus'] = [];
  for (const value of request.sweep.values) {
    const kind = request.sweep.kind;
    const condition: BenchCondition =
      kind === 'speed'
        ? { ...request.condition, tasMps: value }
        : kind === 'height'
          ? { ...request.condition, heightM: value }
          : { ...request.condition, shifts: { ...request.condition.shifts, [kind]: value } };
    try {
      const ready = prepareSubject(subject, condition, true);
      const damper = condition.yawDamper ? ready.aircraft.yawDamper : null;
      const a = damper
        ? withYawDamper(ready.system.A, ready.system.B.rudder, { gainS: damper.gainS, washoutS: damper.washoutS })
        : ready.system.A;
      out.push({ value, roots: lateralModes(a, damper ? 5 : 4).modes.map((m) => ({ re: m.re, im: m.im })) });
    } catch {
      // A step of the sweep outside what the data can trim is left out of the locus.
    }
  }
  return out;
}
