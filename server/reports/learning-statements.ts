/**
 * Attempts as xAPI statements (IEEE 9274.1.1): actor by account and never by e-mail, verb, scenario as object, result with
 * score, success, completion and ISO 8601 duration, registration in the context, extensions under IRI keys.
 */

export interface StatementCriterion {
  id: string;
  value: number | null;
  unit: string;
  margin: number | null;
  verdict: 'met' | 'near' | 'not-met' | 'not-reached';
  required: boolean;
}
export interface StatementAttempt {
  /** UUID of the attempt; also the registration. */
  id: string;
  /** UUID of the statement, stable per result, so that sending twice stores one. */
  statementId: string;
  person: { id: string; displayName: string };
  scenario: { slug: string; title: string; summary: string; revision: number };
  airframe: { slug: string; revision: number };
  modelVersion: string;
  completedAt: string;
  durationS: number;
  ended: string;
  passed: boolean;
  criteria: readonly StatementCriterion[];
  /** Instructor who signed off, when one did. */
  signedOffBy?: { id: string; displayName: string } | null;
}

/** ISO 8601 duration with hundredths of a second, as the standard asks (e.g. PT30.25S). */
export function isoDuration(seconds: number): string {
  const s = Math.max(0, seconds);
  return `PT${Number(s.toFixed(2))}S`;
}

/**
 * One statement of an attempt's result.
 * @param homePage Address of this installation: the account authority and the root of all IRIs.
 */
export function attemptStatement(attempt: StatementAttempt, homePage: string): Record<string, unknown> {
  const root = homePage.replace(/\/+$/, '');
  const required = attempt.criteria.filter((c) => c.required);
  const met = required.filter((c) => c.verdict === 'met' || c.verdict === 'near').length;
  const scored = required.length > 0;
  return {
    id: attempt.statementId,
    actor: account(attempt.person, root),
    verb: {
      id: attempt.passed ? 'http://adlnet.gov/expapi/verbs/passed' : 'http://adlnet.gov/expapi/verbs/failed',
      display: { en: attempt.passed ? 'passed' : 'failed' },
    },
    object: {
      objectType: 'Activity',
      id: `${root}/scenarios/${encodeURIComponent(attempt.scenario.slug)}`,
      definition: {
        type: 'http://adlnet.gov/expapi/activities/simulation',
        name: { en: attempt.scenario.title },
        description: { en: attempt.scenario.summary },
      },
    },
    result: {
      ...(scored ? { score: { scaled: met / required.length, raw: met, min: 0, max: required.length } } : {}),
      success: attempt.passed,
      completion: attempt.ended === 'completed' || attempt.ended === 'touchdown',
      duration: isoDuration(attempt.durationS),
      extensions: {
        [`${root}/terms/ended`]: attempt.ended,
        [`${root}/terms/criteria`]: attempt.criteria.map((c) => ({
          id: c.id,
          value: c.value,
          unit: c.unit,
          margin: c.margin,
          verdict: c.verdict,
          required: c.required,
        })),
      },
    },
    context: {
      registration: attempt.id,
      platform: 'Sidewash',
      language: 'en',
      ...(attempt.signedOffBy ? { instructor: account(attempt.signedOffBy, root) } : {}),
      extensions: {
        [`${root}/terms/scenario-revision`]: attempt.scenario.revision,
        [`${root}/terms/airframe-revision`]: `${attempt.airframe.slug} ${attempt.airframe.revision}`,
        [`${root}/terms/model-version`]: attempt.modelVersion,
      },
    },
    timestamp: attempt.completedAt,
  };
}

function account(person: { id: string; displayName: string }, homePage: string): Record<string, unknown> {
  return { objectType: 'Agent', name: person.displayName, account: { homePage, name: person.id } };
}
