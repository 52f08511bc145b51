import { describe, expect, it } from 'vitest';
import { createStream } from '#shared/numerics/random.ts';

describe('random streams', () => {
  it('repeat from seed and name, and differ between names and seeds', () => {
    const take = (seed: number, name: string) => Array.from({ length: 5 }, createStream(seed, name).uniform);
    expect(take(7, 'gust')).toEqual(take(7, 'gust'));
    expect(take(7, 'gust')).not.toEqual(take(7, 'gusu'));
    expect(take(7, 'gust')).not.toEqual(take(8, 'gust'));
    expect(take(7 + 2 ** 32, 'gust')).not.toEqual(take(7, 'gust'));
  });

  it('go on from a saved state', () => {
    const stream = createStream(3, 'turbulence');
    stream.normal();
    const saved = new Float64Array(6);
    expect(stream.saveInto(saved, 1)).toBe(5);
    const expected = [stream.uniform(), stream.normal()];
    expect(stream.restoreFrom(saved, 1)).toBe(5);
    expect([stream.uniform(), stream.normal()]).toEqual(expected);
  });

  it('have the moments of their distributions (200,000 draws, seed 11, five standard errors)', () => {
    const n = 200_000;
    const stream = createStream(11, 'moments');
    let mean = 0;
    let square = 0;
    let third = 0;
    let fourth = 0;
    let uniform = 0;
    for (let i = 0; i < n; i++) {
      const z = stream.normal();
      mean += z / n;
      square += (z * z) / n;
      third += z ** 3 / n;
      fourth += z ** 4 / n;
      uniform += stream.uniform() / n;
    }
    const se = 5 / Math.sqrt(n);
    expect(Math.abs(mean)).toBeLessThan(se);
    expect(Math.abs(square - 1)).toBeLessThan(se * Math.sqrt(2));
    expect(Math.abs(third)).toBeLessThan(se * Math.sqrt(15));
    expect(Math.abs(fourth - 3)).toBeLessThan(se * Math.sqrt(96));
    expect(Math.abs(uniform - 0.5)).toBeLessThan(se / Math.sqrt(12));
  });
});
