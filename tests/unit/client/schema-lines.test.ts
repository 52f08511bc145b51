import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { exampleOf, schemaLines } from '../../../src/features/interface/schema-lines.ts';

const json = (schema: z.ZodType): Record<string, unknown> =>
  z.toJSONSchema(schema, { io: 'input', unrepresentable: 'any' });

describe('lines of a schema', () => {
  it('name members by depth with form, bounds and what must be there', () => {
    const schema = z.strictObject({
      name: z.string().max(40),
      rows: z.array(z.object({ at: z.number().min(0), kind: z.enum(['a', 'b']).nullable() })).min(1),
      size: z.number().int().default(5),
    });
    expect(schemaLines(json(schema))).toEqual([
      { depth: 0, name: 'name', kind: 'string', rules: 'at most 40 characters', required: true },
      { depth: 0, name: 'rows', kind: 'list of object', rules: 'at least 1', required: true },
      { depth: 1, name: 'at', kind: 'number', rules: '≥ 0', required: true },
      { depth: 1, name: 'kind', kind: '"a" | "b" or null', rules: '', required: true },
      { depth: 0, name: 'size', kind: 'integer', rules: 'otherwise 5', required: false },
    ]);
  });

  it('give one line for what is no object', () => {
    expect(schemaLines(json(z.unknown()))).toEqual([
      { depth: 0, name: '', kind: 'anything', rules: '', required: true },
    ]);
  });

  it('end for a schema that holds itself', () => {
    const knot: Record<string, unknown> = { type: 'object', properties: {} };
    knot['properties'] = { again: knot };
    expect(schemaLines(knot).length).toBeLessThan(20);
  });

  it('give an example that the schema takes', () => {
    const schema = z.strictObject({
      id: z.uuid(),
      due: z.iso.datetime(),
      tries: z.number().int().min(3),
      kind: z.enum(['step', 'pulse']),
      who: z.array(z.strictObject({ name: z.string(), late: z.boolean() })),
      note: z.string().default(''),
    });
    expect(schema.safeParse(exampleOf(json(schema))).success).toBe(true);
  });
});
