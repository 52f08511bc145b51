/** The published cases in a worker of their own, and what has come of each so far. */
import { computed, onUnmounted, reactive, ref, shallowRef } from 'vue';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import type { CheckLine, ChecksCommand, ChecksReport, OutcomeLine } from '../../runner/workers/checks/checks-types.ts';

export type CheckState = 'met' | 'near' | 'not' | 'running';

export const STATE_WORDS: Readonly<Record<CheckState, string>> = {
  met: 'Met',
  near: 'Close',
  not: 'Not met',
  running: 'To run',
};

/** From this share of the tolerance on a met value is called close. */
const CLOSE = 0.8;

export function useChecks() {
  const lines = shallowRef<CheckLine[]>([]);
  const outcomes = reactive(new Map<string, OutcomeLine>());
  const running = ref(false);
  const failure = ref('');

  const worker = new Worker(new URL('../../runner/workers/checks/checks.worker.ts', import.meta.url), {
    type: 'module',
  });
  const tell = (command: ChecksCommand): void => worker.postMessage(command);
  worker.onmessage = (event: MessageEvent<ChecksReport>) => {
    const report = event.data;
    if (report.kind === 'cases') {
      lines.value = report.lines;
      runAll();
    } else if (report.kind === 'outcome') outcomes.set(report.id, report);
    else running.value = false;
  };
  worker.onerror = (event) => {
    failure.value = event.message || 'The checks stopped. Reload the page.';
    running.value = false;
  };
  onUnmounted(() => worker.terminate());

  /** With fewer than the five demonstration airframes only the published cases are there. */
  function open(airframes: Record<string, Airframe>): void {
    tell({ kind: 'open', airframes: JSON.parse(JSON.stringify(airframes)) as typeof airframes }); // proxies do not pass to a worker
  }
  function runAll(): void {
    outcomes.clear();
    running.value = true;
    tell({ kind: 'run', ids: lines.value.map((line) => line.id) });
  }
  function stop(): void {
    tell({ kind: 'stop' });
  }
  function stateOf(line: CheckLine): CheckState {
    const outcome = outcomes.get(line.id);
    if (!outcome) return 'running';
    if (outcome.verdict !== 'agrees') return 'not';
    return outcome.deviation !== null && outcome.deviation > CLOSE ? 'near' : 'met';
  }
  /** Computed minus published in units of the tolerance. */
  function signed(line: CheckLine): number | null {
    const computedValue = outcomes.get(line.id)?.computed ?? null;
    if (computedValue === null || line.published === null || !line.tolerance) return null;
    return (computedValue - line.published) / line.tolerance;
  }
  const tally = computed(() => {
    const out: Record<CheckState, number> = { met: 0, near: 0, not: 0, running: 0 };
    for (const line of lines.value) out[stateOf(line)]++;
    return out;
  });
  return { lines, outcomes, running, failure, open, runAll, stop, stateOf, signed, tally };
}

/** A number at reading length; dots while it is still to come. */
export const shortNumber = (value: number | null | undefined): string =>
  value === null || value === undefined ? '…' : String(Number(value.toPrecision(6)));

/** The unit with the blank that belongs before it: none before a degree sign. */
export const withBlank = (unit: string): string => (unit === '' || unit === '°' ? unit : `\u00A0${unit}`);
