import { crosswindPicture } from '#shared/analysis/bench-crosswind.ts';
import {
  DERIVATIVE_KEYS,
  prepareSubject,
  stallKt,
  type BenchSubject,
  type PreparedSubject,
} from '#shared/analysis/bench-condition.ts';
import { modesPicture, type ModesPicture } from '#shared/analysis/bench-modes.ts';
import { criticalEngine } from '#shared/analysis/critical-engine.ts';
import { minimumControlSpeed } from '#shared/analysis/minimum-control-speed.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { stallTasMps } from '#shared/model/aircraft.ts';
import { densityAt } from '#shared/model/atmosphere.ts';
import { casFromTas } from '#shared/model/airspeeds.ts';
import { ModelError } from '#shared/model/errors.ts';
import { letterOf, sourceLetters, type SourceLetter } from '#shared/model/source-letters.ts';
import { valueSource } from '#shared/model/value-source.ts';
import { DEG, FT, KT } from '#shared/units/constants.ts';
import { formatQuantity, inUnit, unitOf, type UnitPreference } from '#shared/units/quantity.ts';
import type { AnalysisReport, ReportLimit } from '../../reports/pdf/analysis-report-data.ts';
import { storedAirframe } from '../attempts/attempt-data.ts';
import { analysisSubject, type AnalysisSubject } from './analysis-subject.ts';
import { FULL_BANK, reportCautions, speedWords } from './report-cautions.ts';
import { grouped, reportInputs } from './report-inputs.ts';
import type { ReportJob } from './report-job.ts';
import { limitSpreads, SPREAD_DRAWS, type ControlCase } from './report-spreads.ts';

/** A state that cannot be computed, in words. */
export class ReportRefusal extends Error {
  override readonly name = 'ReportRefusal';
}

const BANKS = Array.from({ length: 21 }, (_, i) => i / 4);

const SWEEP = 13;

/** Everything an analysis report prints, computed from the documents. @throws {ReportRefusal} */
export function reportFigures(job: ReportJob): AnalysisReport {
  const subjects: BenchSubject[] = job.subjects.map(({ label, document }) => ({
    label,
    airframe: storedAirframe(document),
  }));
  const airframe = subjects[0].airframe;
  const subject = analysisSubject(job.state, airframe);
  const { condition } = subject;
  const lead = prepared(subjects[0], subject);
  const stall = stallTasMps(lead.aircraft, densityAt(condition.heightM));
  const picture = modesPicture({
    kind: 'modes',
    condition,
    subjects,
    sweep: { kind: 'speed', values: Array.from({ length: SWEEP }, (_, i) => stall * (1.05 + i * 0.16)) },
  });
  const letters = sourceLetters(airframe);
  const control = controlCase(lead, subject);
  const { units } = job;
  const limits = reportLimits(lead, subject, control, units);
  return {
    head: job.head,
    speedUnit: unitOf('speed', units),
    facts: facts(lead, subject, units),
    moved: movedWords(condition.shifts),
    derivatives: reportDerivatives(lead, letters),
    sources: letters,
    inertias: inertiaWords(airframe),
    sPlane: sPlane(picture, condition.heightM, units),
    controlSpeed: controlSpeed(lead, subject, control, units),
    criteria: picture.subjects[0]?.criteria ?? [],
    modes: picture.subjects[0]?.found.modes ?? [],
    limits: limits.rows,
    draws: limits.draws,
    compared: comparedRows(picture, subjects, subject, units),
    inputs: reportInputs(airframe, lead.aircraft.configuration, letters),
    cautions: [
      ...reportCautions(lead, subject, control, units),
      ...picture.problems.map((words) => `Left out: ${words}.`),
    ],
    answers: job.answers.map(({ field, message, answer }) => ({ field, message, answer })),
  };
}

function prepared(lead: BenchSubject, { condition }: AnalysisSubject): PreparedSubject {
  try {
    return prepareSubject(lead, condition, true);
  } catch (error) {
    if (error instanceof ModelError)
      throw new ReportRefusal(
        `At this condition nothing can be computed: ${error.message}. Choose another speed or height.`,
      );
    throw error;
  }
}

/** The failed engines of a state, or the critical one; null where none can fail. */
function controlCase({ aircraft }: PreparedSubject, subject: AnalysisSubject): ControlCase | null {
  if (aircraft.engines.length === 0) return null;
  const { condition, lever, feathered } = subject;
  const named = subject.failed.map((name) => aircraft.engines.findIndex((e) => e.name === name)).filter((i) => i >= 0);
  const failed =
    named.length > 0 ? named : [criticalEngine(aircraft, { heightM: condition.heightM, lever, feathered }).index];
  return { heightM: condition.heightM, failed, lever, feathered };
}

function facts(
  { aircraft, system, klass, category }: PreparedSubject,
  subject: AnalysisSubject,
  units: UnitPreference,
) {
  const loading = aircraft.loading ?? 'as data';
  return [
    { label: 'Configuration', value: aircraft.configuration },
    {
      label: 'Speed, height',
      value: `${speedWords(subject.casKt, units)}, ${formatQuantity(subject.heightFt * FT, 'height', units)}`,
    },
    { label: 'Mass', value: `${grouped(Math.round(aircraft.massKg))} kg` },
    { label: 'Loading', value: loading },
    { label: 'Lift coefficient', value: system.CL.toFixed(2) },
    { label: 'Class, category', value: `${klass}, ${category}${subject.condition.yawDamper ? ', damper on' : ''}` },
  ];
}

function movedWords(shifts: AnalysisSubject['condition']['shifts']): string {
  const moved = Object.entries(shifts).filter(([, by]) => by !== 0);
  if (moved.length === 0) return '';
  const words = moved.map(([key, by]) => `${key} ${by > 0 ? '+' : ''}${Number(by.toPrecision(4))}`);
  return `Moved for this study, not in the revision: ${words.join(', ')} per radian.`;
}

function reportDerivatives({ airframe, aircraft, system }: PreparedSubject, letters: readonly SourceLetter[]) {
  const c = Math.max(
    0,
    airframe.configurations.findIndex(({ name }) => name === aircraft.configuration),
  );
  const rows = airframe.configurations[c].derivatives;
  const nearest = rows.reduce(
    (best, row, i) => (Math.abs(row.CL - system.CL) < Math.abs(rows[best].CL - system.CL) ? i : best),
    0,
  );
  return DERIVATIVE_KEYS.map((key, i) => {
    const { text, uncertaintyPct } = valueSource(airframe, `/configurations/${c}/derivatives/${nearest}/${key}`);
    return { key, value: system.derivatives[i], uncertaintyPct, letter: letterOf(letters, text) };
  });
}

function inertiaWords({ mass }: Airframe): string {
  return `Ixx ${grouped(mass.Ixx_kgm2)}, Izz ${grouped(mass.Izz_kgm2)}, Ixz ${grouped(mass.Ixz_kgm2)} kg·m², ${mass.axes} axes`;
}

function sPlane(picture: ModesPicture, heightM: number, units: UnitPreference): AnalysisReport['sPlane'] {
  const speed = (tasMps: number): number => inUnit(casFromTas(tasMps, heightM), 'speed', units);
  const locus = picture.locus.flatMap(({ value, roots }) =>
    roots
      .filter((root) => root.im > 0)
      .slice(0, 1)
      .map((root) => ({ speed: speed(value), ...root })),
  );
  const roots = picture.subjects[0]?.found.modes.map(({ re, im }) => ({ re, im })) ?? [];
  return { boundaries: picture.boundaries, top: picture.top, roots, locus };
}

function controlSpeed(
  lead: PreparedSubject,
  subject: AnalysisSubject,
  control: ControlCase | null,
  units: UnitPreference,
): AnalysisReport['controlSpeed'] {
  const stall = inUnit(stallKt(lead.aircraft, subject.condition.heightM) * KT, 'speed', units);
  if (control === null)
    return { reason: 'The data has no engines, so none can fail.', failed: '', bankDeg: [], speed: [], stall };
  const failed = control.failed.map((i) => lead.aircraft.engines[i].name).join(', ');
  const speeds = BANKS.map((deg) =>
    minimumControlSpeed(lead.aircraft, { ...control, bank: { exactlyRad: deg * DEG } }),
  );
  const none = speeds.every((speed) => !speed.found);
  const first = speeds[0];
  return {
    reason: none && !first.found ? `None: ${first.message}.` : null,
    failed,
    bankDeg: BANKS,
    speed: speeds.map((speed) => (speed.found ? inUnit(speed.casMps, 'speed', units) : null)),
    stall,
  };
}

function reportLimits(
  lead: PreparedSubject,
  subject: AnalysisSubject,
  control: ControlCase | null,
  units: UnitPreference,
) {
  const { condition } = subject;
  const shown = (kt: number | null): number | null => (kt === null ? null : inUnit(kt * KT, 'speed', units));
  const spreads = limitSpreads(lead.airframe, condition, control);
  const rows: ReportLimit[] = [];
  if (control !== null) {
    for (const deg of [0, FULL_BANK]) {
      const speed = minimumControlSpeed(lead.aircraft, { ...control, bank: { exactlyRad: deg * DEG } });
      const toward = deg === 0 ? 'wings level' : `bank ${deg}° live`;
      rows.push({
        name: `Vmca, ${toward}`,
        speed: speed.found ? inUnit(speed.casMps, 'speed', units) : null,
        binds: speed.found ? speed.limitedBy : speed.message,
        sideslipDeg: speed.found ? speed.betaRad / DEG : null,
        aileronDeg: speed.found ? speed.aileronRad / DEG : null,
        rudderDeg: speed.found ? speed.rudderRad / DEG : null,
        twoSigma: shown(deg === 0 ? spreads.level : spreads.banked),
      });
    }
  }
  const wind = crosswindPicture({ kind: 'crosswind', condition: { ...condition, shifts: {} }, subjects: [lead] })
    .subjects[0];
  if (wind !== undefined) {
    rows.push({
      name: `Crosswind at ${speedWords(subject.casKt, units)}`,
      speed: shown(wind.withinDataKt),
      binds: wind.outside ? 'end of the data, 15°' : wind.binds,
      sideslipDeg: wind.at.betaDeg,
      aileronDeg: wind.at.aileronDeg,
      rudderDeg: wind.at.rudderDeg,
      twoSigma: wind.outside ? null : shown(spreads.crosswind),
    });
  }
  return { rows, draws: spreads.fields > 0 ? SPREAD_DRAWS : 0 };
}

function comparedRows(
  picture: ModesPicture,
  subjects: readonly BenchSubject[],
  subject: AnalysisSubject,
  units: UnitPreference,
) {
  if (subjects.length < 2) return [];
  const { condition } = subject;
  const winds = crosswindPicture({ kind: 'crosswind', condition, subjects }).subjects;
  const text = (value: number | null | undefined, digits: number): string =>
    value === null || value === undefined || !Number.isFinite(value) ? '-' : value.toFixed(digits);
  const windOf = (label: string): number | null => {
    const kt = winds.find((one) => one.label === label)?.withinDataKt;
    return kt === undefined ? null : inUnit(kt * KT, 'speed', units);
  };
  return picture.subjects.map((of) => {
    const dutch = of.found.modes.find(({ kind }) => kind === 'dutch-roll');
    const roll = of.found.modes.find(({ kind }) => kind === 'roll');
    const i = subjects.findIndex(({ label }) => label === of.label);
    const ready = prepareSubject(subjects[i], condition, i === 0);
    const control = controlCase(ready, subject);
    const at = (bank: { exactlyRad: number } | { upToRad: number }): number | null => {
      const speed = control === null ? null : minimumControlSpeed(ready.aircraft, { ...control, bank });
      return speed?.found ? inUnit(speed.casMps, 'speed', units) : null;
    };
    return {
      label: of.label,
      cells: [
        text(dutch?.zeta, 3),
        text(dutch?.wn, 2),
        text(roll?.tauS, 2),
        of.level === 4 ? 'below 3' : String(of.level),
        text(at({ exactlyRad: 0 }), 1),
        text(at({ upToRad: FULL_BANK * DEG }), 1),
        text(windOf(of.label), 1),
      ],
    };
  });
}
