import { cos, ln, PI } from './elementary.ts';

/** A stream of random numbers that repeats bit for bit from its seed and name, and can be put away and taken up again. */
export interface Stream {
  /** Uniform on [0, 1), 53 bits. */
  uniform(): number;
  /** Normal with mean 0 and variance 1 (Box–Muller, two uniforms each). */
  normal(): number;
  /** Writes the state into `arr` from index `at`; returns the index after it. */
  saveInto(arr: Float64Array, at: number): number;
  /** Takes the state from `arr` at index `at`; returns the index after it. */
  restoreFrom(arr: Float64Array, at: number): number;
}

/** Length of a stream's saved state. */
export const STREAM_STATE_LENGTH = 4;

/** Finalizer of a 32-bit integer hash (murmur3). */
function mix32(h: number): number {
  let x = h | 0;
  x = Math.imul(x ^ (x >>> 16), 0x85ebca6b);
  x = Math.imul(x ^ (x >>> 13), 0xc2b2ae35);
  return x ^ (x >>> 16);
}

/**
 * A new random stream; different names under one seed are independent, and adding a stream changes no other.
 *
 * xoshiro128** on 32-bit integers (period 2^128 − 1); seeded by hashing seed and name.
 *
 * @param seed  Any finite number; its 53-bit integer part counts.
 * @param name  Purpose of the stream, such as an event id.
 * @returns     The stream, at its start.
 * @throws      Nothing.
 * @sign        none
 * @source      D. Blackman, S. Vigna, "Scrambled linear pseudorandom number generators", ACM TOMS 47 (2021); G. Box,
 *              M. Muller, "A note on the generation of random normal deviates", Ann. Math. Stat. 29 (1958).
 */
export function createStream(seed: number, name: string): Stream {
  const whole = Math.trunc(seed);
  let h = mix32(whole | 0) ^ mix32(Math.floor(whole / 4294967296) ^ 0x9e3779b9);
  for (let i = 0; i < name.length; i++) h = Math.imul(h ^ name.charCodeAt(i), 0x01000193);
  const s = new Int32Array(4);
  for (let i = 0; i < 4; i++) {
    h = (h + 0x9e3779b9) | 0;
    s[i] = mix32(h);
  }
  if ((s[0] | s[1] | s[2] | s[3]) === 0) s[0] = 1;

  function next(): number {
    const scrambled = Math.imul(s[1], 5);
    const result = Math.imul((scrambled << 7) | (scrambled >>> 25), 9);
    const t = s[1] << 9;
    s[2] ^= s[0];
    s[3] ^= s[1];
    s[1] ^= s[2];
    s[0] ^= s[3];
    s[2] ^= t;
    s[3] = (s[3] << 11) | (s[3] >>> 21);
    return result >>> 0;
  }

  function uniform(): number {
    const high = next() >>> 5;
    const low = next() >>> 6;
    return (high * 67108864 + low) / 9007199254740992;
  }

  return {
    uniform,
    normal() {
      const radius = Math.sqrt(-2 * ln(1 - uniform()));
      return radius * cos(2 * PI * uniform());
    },
    saveInto(arr, at) {
      for (let i = 0; i < 4; i++) arr[at + i] = s[i];
      return at + 4;
    },
    restoreFrom(arr, at) {
      for (let i = 0; i < 4; i++) s[i] = arr[at + i];
      return at + 4;
    },
  };
}
