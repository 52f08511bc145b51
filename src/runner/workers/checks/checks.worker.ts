/** Runs the published cases one after another and reports each as it ends; the page may stop it between two cases. */
import { allChecks, publishedChecks } from '#shared/analysis/checks/all-checks.ts';
import { runCheck, toleranceOf } from '#shared/analysis/checks/published-case.ts';
import { hasAllShipped } from '#shared/analysis/checks/shipped-slugs.ts';
import { topicOf } from '#shared/analysis/checks/topics.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import type { CheckLine, ChecksCommand, ChecksReport } from './checks-types.ts';

let lines: CheckLine[] = [];
let queue: string[] = [];
let cases = new Map<string, ReturnType<typeof allChecks>[number]>();

function report(message: ChecksReport): void {
  self.postMessage(message);
}

function open(airframes: Record<string, Airframe>): void {
  const all = hasAllShipped(airframes) ? allChecks(airframes) : publishedChecks();
  cases = new Map(all.map((c) => [c.id, c]));
  lines = all.map((c) => ({
    id: c.id,
    group: c.group,
    topic: topicOf(c.group),
    quantity: c.kind === 'fact' ? c.statement : c.quantity,
    provenance: c.provenance,
    source: c.source,
    kind: c.kind,
    published: c.kind === 'value' ? c.published : null,
    unit: c.kind === 'value' ? c.unit : '',
    tolerance: c.kind === 'value' ? toleranceOf(c) : null,
    toleranceText:
      c.kind === 'value'
        ? 'relative' in c.tolerance
          ? `${Number((c.tolerance.relative * 100).toPrecision(3))} %`
          : String(c.tolerance.absolute)
        : '',
  }));
  report({ kind: 'cases', lines });
}

function next(): void {
  const id = queue.shift();
  if (id === undefined) {
    report({ kind: 'done' });
    return;
  }
  const found = cases.get(id);
  if (found) {
    const { verdict, computed, deviation, detail } = runCheck(found);
    report({ kind: 'outcome', id, verdict, computed, deviation, detail });
  }
  setTimeout(next, 0);
}

self.onmessage = (event: MessageEvent<ChecksCommand>) => {
  const command = event.data;
  if (command.kind === 'open') open(command.airframes);
  else if (command.kind === 'run') {
    const idle = queue.length === 0;
    queue = [...command.ids];
    if (idle) next();
  } else queue = [];
};
