import { allChecks } from '#shared/analysis/checks/all-checks.ts';
import { runCheck, toleranceOf } from '#shared/analysis/checks/published-case.ts';
import type { CheckOutcome } from '#shared/analysis/checks/published-case.ts';
import type { Command } from '../command.ts';
import { printJson, printText, table } from '../output.ts';
import { readShippedAirframes } from '../shipped-airframes.ts';

export const command: Command = {
  name: 'check',
  usage: '[--json]',
  summary: 'Runs every published case and shows the computed value beside the published one.',
  positionals: [],
  options: { json: 'flag' },
  async run(args) {
    const outcomes = allChecks(await readShippedAirframes()).map(runCheck);
    const agreed = outcomes.filter((outcome) => outcome.verdict === 'agrees').length;
    if (args.flags.has('json')) {
      printJson({ checks: outcomes.map(jsonOf), agreed, total: outcomes.length });
    } else {
      printText([...groupedText(outcomes), '', `${agreed} of ${outcomes.length} agree.`]);
    }
    return agreed === outcomes.length ? 0 : 1;
  },
};

function jsonOf(outcome: CheckOutcome): Record<string, unknown> {
  const { case: check, verdict, computed, detail } = outcome;
  const shared = { id: check.id, group: check.group, quantity: check.quantity, verdict };
  const origin = { provenance: check.provenance, source: check.source };
  return check.kind === 'value'
    ? {
        ...shared,
        published: check.published,
        computed,
        unit: check.unit,
        tolerance: toleranceOf(check),
        ...origin,
        detail,
      }
    : { ...shared, statement: check.statement, shown: detail, ...origin };
}

function groupedText(outcomes: readonly CheckOutcome[]): string[] {
  const lines: string[] = [];
  let group = '';
  let rows: string[][] = [];
  const flush = () => {
    if (rows.length > 0) lines.push(...table(rows));
    rows = [];
  };
  for (const outcome of outcomes) {
    const { case: check, verdict, computed, detail } = outcome;
    if (check.group !== group) {
      flush();
      group = check.group;
      lines.push(...(lines.length > 0 ? [''] : []), group);
    }
    if (check.kind === 'value') {
      const number = computed === null ? detail : significant(computed);
      const unit = check.unit === '' ? '' : ` ${check.unit}`;
      const within = `±${significant(toleranceOf(check))}`;
      rows.push([
        `  ${verdict}`,
        check.quantity,
        `${significant(check.published)}${unit}`,
        number,
        within,
        origin(check),
      ]);
    } else {
      rows.push([`  ${verdict}`, check.quantity, check.statement, detail, '', origin(check)]);
    }
  }
  flush();
  return lines;
}

function significant(value: number): string {
  return String(Number(value.toPrecision(6))).replace('-', '−');
}

function origin({ source, provenance }: CheckOutcome['case']): string {
  return `${source} (${provenance})`;
}
