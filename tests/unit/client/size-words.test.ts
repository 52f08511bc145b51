import { describe, expect, it } from 'vitest';
import { sizeWords, spanWords } from '../../../src/views/administration/size-words.ts';

describe('sizes and spans in words', () => {
  it.each([
    [0, '0 B'],
    [999, '999 B'],
    [1000, '1.00 kB'],
    [14_240_000, '14.2 MB'],
    [999_499_999, '999 MB'],
    [999_600_000, '1.00 GB'],
    [5e15, '5000 TB'],
  ])('%d bytes are %s', (bytes, words) => {
    expect(sizeWords(bytes)).toBe(words);
  });

  it.each([
    [59, '0 min'],
    [3600, '1 h 0 min'],
    [86_400 + 7200, '1 day 2 h'],
    [3 * 86_400, '3 days 0 h'],
  ])('%d seconds are %s', (seconds, words) => {
    expect(spanWords(seconds)).toBe(words);
  });
});
