import type { z } from 'zod';
import { issuesFromSchema } from '#shared/model/field-issue.ts';
import { ProblemError } from '../services/problem-error.ts';

/** The value as its schema gives it; a `validation` problem with field, rule, message and remedy otherwise. */
export function parse<S extends z.ZodType>(schema: S, value: unknown): z.output<S> {
  const parsed = schema.safeParse(value);
  if (parsed.success) return parsed.data;
  const errors = issuesFromSchema(parsed.error, value);
  throw new ProblemError(
    'validation',
    errors[0] ? `${errors[0].message}.` : 'The request does not have the expected form.',
    { errors },
  );
}
