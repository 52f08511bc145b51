import { writeFile } from 'node:fs/promises';
import { createReferencePilot, DEFAULT_DELAY_S, flyRun, handsOff } from '#shared/scenario/reference-pilot.ts';
import { limitText } from '#shared/scenario/describe.ts';
import { createRun } from '#shared/scenario/run.ts';
import type { CriterionResult, Run } from '#shared/scenario/run-types.ts';
import { choiceOption, quantityOption } from '../arguments.ts';
import type { ParsedArguments } from '../arguments.ts';
import type { Command } from '../command.ts';
import { fixed, printJson, printText, table } from '../output.ts';
import { createRunTrace } from '../run-trace.ts';
import type { Extremes } from '../run-trace.ts';
import { namedScenario, readScenario } from '../scenario-file.ts';
import { UsageError } from '../usage-error.ts';

/** Longest delay of the reference pilot. */
const LONGEST_DELAY_S = 600;

export const command: Command = {
  name: 'run',
  usage: 'SCENARIO.json [--airframe FILE] [--pilot hands-off|reference] [--delay 1.0s] [--csv FILE] [--json]',
  summary: 'Flies a scenario hands off (default) or by the reference pilot and judges its criteria.',
  positionals: ['SCENARIO.json'],
  options: { airframe: 'value', pilot: 'value', delay: 'value', csv: 'value', json: 'flag' },
  async run(args) {
    const [file] = args.positionals;
    const { pilot, delayS } = pilotOption(args);
    const { scenario, airframe, notes } = await readScenario(args);
    const csv = args.values.get('csv');
    const { run, trace } = namedScenario(file, () => {
      const made = createRun({ scenario, airframe, seed: scenario.seed });
      const takes = createRunTrace(airframe, made.now, csv !== undefined);
      takes.take(made);
      flyRun(made, pilot === 'reference' ? createReferencePilot(made, delayS) : handsOff(), Infinity, takes.take);
      return { run: made, trace: takes };
    });
    if (run.ended === 'non-finite')
      throw new UsageError(
        `${file}: /events: non-finite: the run stopped at ${fixed(run.timeS, 2)} s: ${run.endDetail ?? 'a state is not finite'}. Lower what the events before it ask.`,
      );
    if (csv !== undefined) await writeCsv(csv, trace.csv());
    const warnings = [...notes, ...run.warnings];
    const who = pilot === 'reference' ? `reference pilot, ${fixed(delayS, 2)} s` : 'hands off';
    if (args.flags.has('json')) printJson(jsonOf(run, trace.extremes, warnings));
    else printText(textOf(scenario.title, who, run, trace.extremes, warnings));
    return 0;
  },
};

function pilotOption(args: ParsedArguments): { pilot: 'hands-off' | 'reference'; delayS: number } {
  const delay = quantityOption(args, 'delay', 'time');
  const pilot = choiceOption(args, 'pilot', ['hands-off', 'reference'] as const);
  if (delay !== undefined && pilot === 'hands-off')
    throw new UsageError('--delay: hands off has no delay; choose --pilot reference');
  if (delay !== undefined && !(delay >= 0 && delay <= LONGEST_DELAY_S)) {
    throw new UsageError(`--delay: ${args.values.get('delay')} is outside 0 s to ${LONGEST_DELAY_S} s`);
  }
  return { pilot: pilot ?? (delay === undefined ? 'hands-off' : 'reference'), delayS: delay ?? DEFAULT_DELAY_S };
}

async function writeCsv(file: string, text: string): Promise<void> {
  try {
    await writeFile(file, text);
  } catch (error) {
    const code = error instanceof Error && 'code' in error ? String(error.code) : 'unknown';
    throw new UsageError(`--csv: ${file}: cannot be written (${code})`);
  }
}

function jsonOf(run: Run, extremes: Extremes, warnings: string[]): Record<string, unknown> {
  return {
    ended: run.ended,
    duration_s: run.timeS,
    criteria: run.results().map(({ id, value, limit, margin, atS, verdict, note }) => ({
      id,
      value,
      limit,
      margin,
      at_s: atS,
      verdict,
      ...(note === undefined ? {} : { note }),
    })),
    extremes,
    warnings,
  };
}

const VERDICTS = {
  met: 'met',
  near: 'met, near the limit',
  'not-met': 'not met',
  'not-reached': 'not reached',
} as const;

function textOf(title: string, who: string, run: Run, extremes: Extremes, warnings: string[]): string[] {
  const rows = run
    .results()
    .map((result) => [
      result.title,
      valueText(result),
      limitText(run.spec.scenario.criteria.find(({ id }) => id === result.id)?.limit ?? { max: NaN, unit: '' }),
      fixed(result.margin, 2),
      result.atS === null ? '–' : `${fixed(result.atS, 2)} s`,
      `${VERDICTS[result.verdict]}${result.note === undefined ? '' : ` (${result.note})`}${result.required ? '' : ', not required'}`,
    ]);
  const head = ['Criterion', 'Value', 'Limit', 'Margin', 'At', 'Verdict'];
  return [
    `${title}: ${who}`,
    `Ended after ${fixed(run.timeS, 2)} s: ${run.ended ?? 'running'}. All required criteria ${run.passed() ? 'met' : 'not met'}.`,
    '',
    ...table([head, ...rows], new Set([1, 3, 4])),
    '',
    ...table(extremeRows(extremes), new Set([1])),
    ...(warnings.length > 0 ? ['', ...warnings] : []),
  ];
}

function valueText({ value, limit }: CriterionResult): string {
  return value === null ? '–' : `${fixed(value, 2)} ${limit.unit}`;
}

function extremeRows(extremes: Extremes): string[][] {
  return [
    ['Greatest bank', `${fixed(extremes.bank_deg, 1)}°`],
    ['Greatest sideslip', `${fixed(extremes.sideslip_deg, 1)}°`],
    ['Greatest yaw rate', `${fixed(extremes.yaw_rate_deg_s, 1)}°/s`],
    ['Greatest roll rate', `${fixed(extremes.roll_rate_deg_s, 1)}°/s`],
    ['Greatest heading change', `${fixed(extremes.heading_deg, 1)}°`],
    ['Greatest rudder', `${fixed(extremes.rudder_deg, 1)}°`],
    ['Greatest aileron', `${fixed(extremes.aileron_deg, 1)}°`],
    ['Height lost', `${fixed(extremes.height_loss_ft, 0)} ft`],
    ['Lowest indicated airspeed', `${fixed(extremes.ias_min_kt, 1)} kt`],
  ];
}
