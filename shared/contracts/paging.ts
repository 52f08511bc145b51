/** Lists page, sort and search on the server; all in the same way. */
import { z } from 'zod';

export const DEFAULT_PAGE_SIZE = 25;
export const MAX_PAGE_SIZE = 100;
const MAX_PAGE = 100_000;
const MAX_SEARCH_LENGTH = 120;

/** Members of a list query shared by all lists. Query strings arrive as text, so numbers are coerced. */
export const pageQueryShape = {
  page: z.coerce.number().int().min(1).max(MAX_PAGE).default(1),
  pageSize: z.coerce.number().int().min(1).max(MAX_PAGE_SIZE).default(DEFAULT_PAGE_SIZE),
};

export const searchShape = { search: z.string().trim().max(MAX_SEARCH_LENGTH).default('') };

/** The keys a list sorts by, each also with a leading "-" for descending: `sort: z.enum(bothWays([...])).default(...)`. */
export function bothWays<const K extends string>(keys: readonly [K, ...K[]]): [K | `-${K}`, ...(K | `-${K}`)[]] {
  const [first, ...rest] = keys;
  return [first, `-${first}`, ...rest.flatMap((key) => [key, `-${key}` as const])];
}

export interface Page<T> {
  items: T[];
  page: number;
  pageSize: number;
  total: number;
}

/** Schema of a page of `item`. */
export function pageOf<T extends z.ZodType>(item: T) {
  return z.object({
    items: z.array(item),
    page: z.number().int().min(1),
    pageSize: z.number().int().min(1),
    total: z.number().int().min(0),
  });
}

/** Lower-case words joined by hyphens; the identifier of airframes and scenarios in addresses. */
export const slugSchema = z
  .string()
  .min(1)
  .max(80)
  .regex(/^[a-z0-9]+(?:-[a-z0-9]+)*$/);

export const revisionNumberSchema = z.coerce.number().int().min(1).max(1_000_000);
