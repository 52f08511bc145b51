import { analyseLateral } from '#shared/analysis/lateral-analysis.ts';
import type { LateralAnalysis } from '#shared/analysis/lateral-analysis.ts';
import { conditionRemarks } from '#shared/analysis/condition-remarks.ts';
import type { CriterionResult } from '#shared/analysis/criteria-8785c.ts';
import type { Mode, ModeKind } from '#shared/analysis/modes.ts';
import type { Aircraft } from '#shared/model/aircraft.ts';
import { FT } from '#shared/units/constants.ts';
import { readAirframe } from '../airframe-file.ts';
import { choiceOption } from '../arguments.ts';
import type { Command } from '../command.ts';
import { aircraftOption, knots, named, speedAndHeight } from '../condition.ts';
import { fixed, printJson, printText, remarkLines, table } from '../output.ts';

export const command: Command = {
  name: 'modes',
  usage:
    'AIRFRAME.json --speed 90kt | --ias 90kt --height 0ft [--configuration NAME] [--category A|B|C] [--class I|II-L|II-C|III|IV] [--yaw-damper] [--json]',
  summary: 'Lateral modes (Dutch roll, roll, spiral) and criteria in one condition; yaw damper off unless asked for.',
  positionals: ['AIRFRAME.json'],
  options: {
    speed: 'value',
    ias: 'value',
    height: 'value',
    configuration: 'value',
    category: 'value',
    class: 'value',
    'yaw-damper': 'flag',
    json: 'flag',
  },
  async run(args) {
    const [file] = args.positionals;
    const json = args.flags.has('json');
    const airframe = await readAirframe(file, json);
    const aircraft = aircraftOption(args, airframe, file);
    const { tasMps, casMps, heightM } = speedAndHeight(args);
    const options = {
      category: choiceOption(args, 'category', ['A', 'B', 'C']),
      class: choiceOption(args, 'class', ['I', 'II', 'II-L', 'II-C', 'III', 'IV']),
      yawDamper: args.flags.has('yaw-damper'),
    };
    const analysis = named(file, () => analyseLateral(aircraft, { tasMps, heightM }, options));
    const remarks = remarkLines(conditionRemarks(aircraft, tasMps, heightM), json);
    if (json) printJson(jsonOf(analysis));
    else printText([...textOf(analysis, aircraft, casMps), ...remarks]);
    return 0;
  },
};

function jsonOf({ system, found, criteria }: LateralAnalysis): Record<string, unknown> {
  return {
    speed_mps: system.tasMps,
    height_m: system.heightM,
    CL: system.CL,
    modes: found.modes.map((mode) => ({
      kind: mode.kind,
      real_per_s: mode.re,
      imag_per_s: mode.im,
      wn_rad_s: mode.wn,
      zeta: mode.zeta,
      period_s: mode.periodS,
      tau_s: mode.tauS,
      halve_s: mode.halveS,
      double_s: mode.doubleS,
    })),
    criteria: criteria.map(({ id, level, value, limit, source, remark }) => ({
      id,
      level,
      value,
      limit,
      source,
      remark,
    })),
  };
}

const KIND_NAMES: Readonly<Record<ModeKind, string>> = {
  'dutch-roll': 'Dutch roll',
  roll: 'Roll',
  spiral: 'Spiral',
  'roll-spiral': 'Roll–spiral (one oscillation)',
  'real-pair': 'In place of the Dutch roll',
  washout: 'Yaw damper washout',
};

function textOf(analysis: LateralAnalysis, aircraft: Aircraft, casMps: number): string[] {
  const { system, found, shapes, criteria } = analysis;
  const damper = analysis.n === 5 ? 'yaw damper on' : 'yaw damper off';
  const head = `${aircraft.name}, ${aircraft.configuration}, class ${analysis.class}, category ${analysis.category}, ${damper}`;
  const condition = `${fixed(knots(casMps), 1)} kt calibrated, ${fixed(knots(system.tasMps), 1)} kt true, ${fixed(system.heightM / FT, 0)} ft, CL ${fixed(system.CL, 3)}`;
  const modeRows = [
    ['Mode', 'root 1/s', 'ω rad/s', 'ζ', 'period s', 'τ s', 'half/double s', '|φ/β|'],
    ...found.modes.map((mode, i) => [
      KIND_NAMES[mode.kind],
      rootText(mode),
      fixed(mode.wn, 3),
      fixed(mode.zeta, 3),
      fixed(mode.periodS, 2),
      fixed(mode.tauS, 2),
      mode.doubleS === undefined ? fixed(mode.halveS, 2) : `doubles ${fixed(mode.doubleS, 2)}`,
      fixed(shapes[i].phiOverBeta, 2),
    ]),
  ];
  const criterionRows = [
    ['Criterion', 'level', 'value', 'Level 1 limit', 'source'],
    ...criteria.map((result) => [result.title, levelText(result), valueText(result), limitText(result), result.source]),
  ];
  return [
    head,
    condition,
    '',
    ...table(modeRows, new Set([2, 3, 4, 5, 6, 7])),
    ...(found.remarks.length > 0
      ? ['', `Remarks: ${found.remarks.join(', ').replaceAll('-', ' ').replaceAll('dutch', 'Dutch')}`]
      : []),
    '',
    ...table(criterionRows),
  ];
}

function rootText(mode: Mode): string {
  return mode.im > 0 ? `${fixed(mode.re, 5)} ± ${fixed(mode.im, 5)}i` : fixed(mode.re, 5);
}

function levelText({ level }: CriterionResult): string {
  if (level === null) return 'not judged';
  return level === 4 ? 'below 3' : String(level);
}

function valueText({ value, unit, remark, level }: CriterionResult): string {
  if (value === null) return remark ?? '–';
  const note = remark !== undefined && level !== null ? ` (${remark})` : '';
  return `${fixed(value, 3)}${unit === '' ? '' : ` ${unit}`}${note}`;
}

function limitText({ limit, sense, unit }: CriterionResult): string {
  if (limit === null) return '–';
  return `${sense} ${Number(limit.toPrecision(3))}${unit === '' ? '' : ` ${unit}`}`;
}
