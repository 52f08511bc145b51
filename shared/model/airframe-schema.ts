import { airframeMembers } from './airframe-format.ts';
import type { Airframe } from './airframe-format.ts';
import { checkAirframe, warningsOf } from './airframe-rules.ts';
import { issuesFromSchema } from './field-issue.ts';
import type { FieldIssue } from './field-issue.ts';

export type {
  Airframe,
  AirframeConfiguration,
  AirframeDerivativeRow,
  AirframeEngine,
  AirframeLoading,
} from './airframe-format.ts';

/** Schema of `sidewash.airframe/1`: every member, and the rules between members. */
export const airframeSchema = airframeMembers.superRefine((airframe, context) => {
  checkAirframe(airframe, (path, rule, message, remedy) => {
    context.addIssue({ code: 'custom', path, message, params: { rule, remedy } });
  });
});

export type ParsedAirframe =
  { ok: true; airframe: Airframe; warnings: FieldIssue[] } | { ok: false; issues: FieldIssue[] };

/**
 * The airframe of a file's content with its warnings, or what is wrong with it.
 *
 * @param input  Anything: what JSON.parse returned, a form's value, a row of the database.
 * @returns      The airframe with defaults filled in and the warnings, or at least one issue naming field and rule.
 * @throws       Nothing.
 * @sign         Surface and wind signs as in the README of this folder.
 * @source       Flight model, airframe data.
 */
export function parseAirframe(input: unknown): ParsedAirframe {
  const parsed = airframeSchema.safeParse(input);
  if (!parsed.success) return { ok: false, issues: issuesFromSchema(parsed.error, input) };
  return { ok: true, airframe: parsed.data, warnings: warningsOf(parsed.data, input) };
}
