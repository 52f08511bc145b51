import { describe, expect, it } from 'vitest';
import { createStateHash, hashBytesHex } from '#shared/numerics/state-hash.ts';

describe('state hash', () => {
  const of = (...values: number[]) => {
    const hash = createStateHash();
    for (const value of values) hash.add(value);
    return hash.hex();
  };

  it('shows the last bit, the order and the sign of zero', () => {
    expect(of(1, 2)).toMatch(/^[0-9a-f]{16}$/u);
    expect(of(1, 2)).toBe(of(1, 2));
    expect(of(1, 2)).not.toBe(of(2, 1));
    expect(of(1)).not.toBe(of(1 + Number.EPSILON));
    expect(of(0)).not.toBe(of(-0));
    expect(of(0)).not.toBe(of(0, 0));
  });

  it('goes on from a saved state', () => {
    const hash = createStateHash();
    hash.add(1);
    const saved = new Float64Array(2);
    hash.saveInto(saved, 0);
    hash.add(2);
    const expected = hash.hex();
    hash.restoreFrom(saved, 0);
    hash.add(2);
    expect(hash.hex()).toBe(expected);
  });

  it('has no collision among 100,000 neighbouring states', () => {
    const seen = new Set<string>();
    for (let i = 0; i < 100_000; i++) seen.add(of(i * 2 ** -40));
    expect(seen.size).toBe(100_000);
  });
});

describe('byte hash', () => {
  it('depends on every byte, the length and the chain', () => {
    const bytes = Uint8Array.from({ length: 37 }, (_, i) => i * 7);
    const plain = hashBytesHex(bytes);
    expect(plain).toMatch(/^[0-9a-f]{16}$/u);
    expect(hashBytesHex(bytes, plain)).not.toBe(plain);
    expect(hashBytesHex(bytes.subarray(0, 36))).not.toBe(plain);
    expect(hashBytesHex(new Uint8Array(4))).not.toBe(hashBytesHex(new Uint8Array(5)));
    for (let i = 0; i < bytes.length; i++) {
      const changed = bytes.slice();
      changed[i] ^= 1;
      expect(hashBytesHex(changed)).not.toBe(plain);
    }
  });
});
