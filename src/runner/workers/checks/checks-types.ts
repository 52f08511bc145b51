import type { Airframe } from '#shared/model/airframe-schema.ts';
import type { Provenance, Verdict } from '#shared/analysis/checks/published-case.ts';

export interface CheckLine {
  id: string;
  group: string;
  /** Gathers several groups. */
  topic: string;
  quantity: string;
  provenance: Provenance;
  source: string;
  kind: 'value' | 'fact';
  published: number | null;
  unit: string;
  tolerance: number | null;
  toleranceText: string;
}
export interface OutcomeLine {
  verdict: Verdict;
  computed: number | null;
  /** In units of the tolerance. */
  deviation: number | null;
  detail: string;
}
/** `airframes` by slug: with all five shipped ones the facts shown on them are among the cases, else only what is published. */
export type ChecksCommand =
  { kind: 'open'; airframes: Record<string, Airframe> } | { kind: 'run'; ids: string[] } | { kind: 'stop' };
export type ChecksReport =
  { kind: 'cases'; lines: CheckLine[] } | ({ kind: 'outcome'; id: string } & OutcomeLine) | { kind: 'done' };
