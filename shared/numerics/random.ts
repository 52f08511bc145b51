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
  let s0 = nextSeed();
  let s1 = nextSeed();
  let s2 = nextSeed();
  let s3 = nextSeed();
  if ((s0 | s1 | s2 | s3) === 0) s0 = 1;

  function nextSeed(): number {
    h = (h + 0x9e3779b9) | 0;
    return mix32(h);
  }

  function next(): number {
    const scrambled = Math.imul(s1, 5);
    const result = Math.imul((scrambled << 7) | (scrambled >>> 25), 9);
    const t = s1 << 9;
    s2 ^= s0;
    s3 ^= s1;
    s1 ^= s2;
    s0 ^= s3;
    s2 ^= t;
    s3 = (s3 << 11) | (s3 >>> 21);
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
      arr[at] = s0;
      arr[at + 1] = s1;
      arr[at + 2] = s2;
      arr[at + 3] = s3;
      return at + STREAM_STATE_LENGTH;
    },
    restoreFrom(arr, at) {
      s0 = arr[at];
      s1 = arr[at + 1];
      s2 = arr[at + 2];
      s3 = arr[at + 3];
      return at + STREAM_STATE_LENGTH;
    },
  };
}
