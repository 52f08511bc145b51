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
      extensions: {
        [`${root}/terms/scenario-revision`]: attempt.scenario.revision,
        [`${root}/terms/airframe-revision`]: `${attempt.airframe.slug} ${attempt.airframe.revision}`,
        [`${root}/terms/model-version`]: attempt.modelVersion,
      },
    },
    timestamp: attempt.completedAt,
  };
}

export interface StatementSignature {
  statementId: string;
  signer: { id: string; displayName: string };
  /** UUID of the statement that is signed. */
  about: string;
  kind: 'sign-off' | 'counter-signature';
  met: boolean;
  at: string;
}

/** An instructor's signature under a result, as a statement about that statement. */
export function signOffStatement(signature: StatementSignature, homePage: string): Record<string, unknown> {
  const root = homePage.replace(/\/+$/, '');
  const word = signature.kind === 'sign-off' ? 'signed off' : 'counter-signed';
  return {
    id: signature.statementId,
    actor: account(signature.signer, root),
    verb: { id: `${root}/verbs/${signature.kind}`, display: { en: word } },
    object: { objectType: 'StatementRef', id: signature.about },
    result: { success: signature.met },
    timestamp: signature.at,
  };
}

/** Voids a statement, as the standard has it: nothing that was stated is taken back silently. */
export function voidingStatement(
  statementId: string,
  about: string,
  at: string,
  homePage: string,
): Record<string, unknown> {
  const root = homePage.replace(/\/+$/, '');
  return {
    id: statementId,
    actor: account({ id: 'sidewash', displayName: 'Sidewash' }, root),
    verb: { id: 'http://adlnet.gov/expapi/verbs/voided', display: { en: 'voided' } },
    object: { objectType: 'StatementRef', id: about },
    timestamp: at,
  };
}

function account(person: { id: string; displayName: string }, homePage: string): Record<string, unknown> {
  return { objectType: 'Agent', name: person.displayName, account: { homePage, name: person.id } };
}
