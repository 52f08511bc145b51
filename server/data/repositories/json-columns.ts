/** What comes out of a JSON or free-text column is unknown until parsed here. */
import {
  type AttemptResult,
  attemptResultSchema,
  attemptSummarySchema,
  drawnValuesSchema,
  endReasonSchema,
} from '#shared/contracts/attempts.ts';
import { scenarioSummarySchema, verdictSchema } from '#shared/contracts/scenarios.ts';
import type { z } from 'zod';

type Verdict = z.infer<typeof verdictSchema>;

export const lanesColumn = (value: unknown) => scenarioSummarySchema.shape.lanes.parse(value);
export const drawnColumn = (value: unknown) => drawnValuesSchema.parse(value);
export const criteriaColumn = (value: unknown): AttemptResult['criteria'] =>
  attemptResultSchema.shape.criteria.parse(value);
export const worstColumn = (value: unknown) => attemptSummarySchema.shape.worst.parse(value ?? null);
export const stripColumn = (value: unknown) => attemptSummarySchema.shape.strip.parse(value ?? null);
export const endedColumn = (value: string): AttemptResult['ended'] => endReasonSchema.parse(value);
export const verdictColumn = (value: string | null): Verdict | null =>
  value === null ? null : verdictSchema.parse(value);
