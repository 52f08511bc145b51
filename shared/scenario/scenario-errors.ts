import type { FieldIssue } from '../model/field-issue.ts';

export type ScenarioErrorCode = 'does-not-fit-airframe' | 'bad-event' | 'foreign-snapshot' | 'no-state-hash';

/** A scenario that cannot be flown as asked. `issues` name field, rule and remedy where the scenario is at fault. */
export class ScenarioError extends Error {
  readonly code: ScenarioErrorCode;
  readonly issues: readonly FieldIssue[];
  constructor(code: ScenarioErrorCode, message: string, issues: readonly FieldIssue[] = []) {
    super(message);
    this.name = 'ScenarioError';
    this.code = code;
    this.issues = issues;
  }
}
