import type { z } from 'zod';

export type AddressParameters = Readonly<Record<string, unknown>>;

/** Each member of a list query read from an address on its own: one that does not fit falls back to its default. */
export function parseAddress<S extends z.ZodObject>(schema: S, address: AddressParameters): z.output<S> {
  const parsed: Record<string, unknown> = {};
  for (const [name, member] of Object.entries(schema.shape)) {
    const given = address[name];
    const result = member.safeParse(Array.isArray(given) ? given[0] : given);
    parsed[name] = result.success ? result.data : member.safeParse(undefined).data;
  }
  return schema.parse(parsed);
}

/** What must stand in the address for `query`: members that differ from their defaults. */
export function toAddress<S extends z.ZodObject>(schema: S, query: z.output<S>): Record<string, string> {
  const standard: Record<string, unknown> = parseAddress(schema, {});
  const address: Record<string, string> = {};
  for (const [name, value] of Object.entries(query)) {
    if (value !== undefined && value !== null && value !== standard[name]) address[name] = String(value);
  }
  return address;
}
