import type { z } from 'zod';

/** What a browser keeps: local storage, or nothing where it is refused. */
export type Keeper = Pick<Storage, 'getItem' | 'setItem' | 'removeItem'>;

/** A stored value that fits its schema, else undefined (absent, damaged, or storage refused). */
export function readStored<S extends z.ZodType>(keeper: Keeper, key: string, schema: S): z.output<S> | undefined {
  try {
    const text = keeper.getItem(key);
    if (text === null) return undefined;
    const content: unknown = JSON.parse(text);
    return schema.safeParse(content).data;
  } catch {
    return undefined; // storage refused or not JSON: as if nothing had been kept
  }
}

/** Returns false where the browser refuses to keep anything. */
export function writeStored(keeper: Keeper, key: string, value: unknown): boolean {
  try {
    keeper.setItem(key, JSON.stringify(value));
    return true;
  } catch {
    return false;
  }
}
