import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { bothWays, pageQueryShape, searchShape } from '#shared/contracts/paging.ts';
import { parseAddress, toAddress } from '../../../src/composables/address-query.ts';

const listSchema = z.strictObject({
  ...pageQueryShape,
  ...searchShape,
  sort: z.enum(bothWays(['title', 'duration'])).default('title'),
});

describe('list query in the address', () => {
  it('reads what fits and falls back, member by member, where it does not', () => {
    const query = parseAddress(listSchema, { page: '3', pageSize: '9000', sort: 'colour', search: ' gust ' });
    expect(query).toMatchObject({ page: 3, pageSize: 25, sort: 'title', search: 'gust' });
  });

  it('takes the first of a repeated parameter', () => {
    expect(parseAddress(listSchema, { page: ['2', '5'] }).page).toBe(2);
  });

  it('writes only what differs from the defaults, and reads back the same', () => {
    const query = { ...parseAddress(listSchema, {}), page: 2, sort: '-duration' as const };
    const address = toAddress(listSchema, query);
    expect(address).toEqual({ page: '2', sort: '-duration' });
    expect(parseAddress(listSchema, address)).toEqual(query);
  });
});
