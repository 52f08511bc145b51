/** A running 64-bit hash over numbers, kept as two 32-bit lanes; the same bits in every JavaScript engine. */
export interface StateHash {
  /** Folds the eight bytes of a number in; every NaN counts as the same value, −0 and 0 differ. */
  add(x: number): void;
  /** The present value as 16 hexadecimal digits; does not disturb the running hash. */
  hex(): string;
  /** Writes the two lanes into `arr` from `at`; returns the index after them. */
  saveInto(arr: Float64Array, at: number): number;
  /** Takes the two lanes from `arr` at `at`; returns the index after them. */
  restoreFrom(arr: Float64Array, at: number): number;
}

/** Length of a hash's saved state. */
export const STATE_HASH_LENGTH = 2;

const SEED_LOW = 0x6a09e667;
const SEED_HIGH = 0xbb67ae85;

function rotl(x: number, bits: number): number {
  return (x << bits) | (x >>> (32 - bits));
}

/** One lane folded with one 32-bit word (the body of murmur3, with a constant of the lane's own). */
function fold(lane: number, word: number, constant: number): number {
  const mixed = lane ^ Math.imul(rotl(Math.imul(word, constant), 15), 0x1b873593);
  return (Math.imul(rotl(mixed, 13), 5) + 0xe6546b64) | 0;
}

function finish(x: number): number {
  let h = x;
  h = Math.imul(h ^ (h >>> 16), 0x85ebca6b);
  h = Math.imul(h ^ (h >>> 13), 0xc2b2ae35);
  return (h ^ (h >>> 16)) >>> 0;
}

function hexOf(low: number, high: number): string {
  const first = finish(high ^ rotl(low, 7));
  const second = finish(low ^ rotl(high, 19) ^ first);
  return first.toString(16).padStart(8, '0') + second.toString(16).padStart(8, '0');
}

/**
 * A new running hash of simulation states.
 *
 * Not cryptographic: it shows a difference, it does not withstand someone who looks for a collision.
 *
 * @returns  The hash, at its start.
 * @throws   Nothing.
 * @sign     none
 * @source   Mixing constants of A. Appleby's MurmurHash3 (public domain); the two-lane arrangement is ours.
 */
export function createStateHash(): StateHash {
  const lanes = new Int32Array([SEED_LOW, SEED_HIGH]);
  const bytes = new DataView(new ArrayBuffer(8));
  return {
    add(x) {
      if (x === x) bytes.setFloat64(0, x, true);
      else {
        bytes.setUint32(0, 0, true);
        bytes.setUint32(4, 0x7ff80000, true);
      }
      const a = bytes.getInt32(0, true);
      const b = bytes.getInt32(4, true);
      lanes[0] = fold(fold(lanes[0], a, 0xcc9e2d51), b, 0xcc9e2d51);
      lanes[1] = fold(fold(lanes[1], b, 0x85ebca77), a, 0x85ebca77);
    },
    hex: () => hexOf(lanes[0], lanes[1]),
    saveInto(arr, at) {
      arr[at] = lanes[0];
      arr[at + 1] = lanes[1];
      return at + 2;
    },
    restoreFrom(arr, at) {
      lanes[0] = arr[at];
      lanes[1] = arr[at + 1];
      return at + 2;
    },
  };
}

/**
 * The 64-bit hash of bytes as 16 hexadecimal digits, optionally continued from an earlier hash (a chain).
 *
 * @param bytes    The bytes; any length.
 * @param seedHex  The hash to continue from: 16 hexadecimal digits.
 * @returns        16 lower-case hexadecimal digits.
 * @throws         Nothing; characters of the seed that are not hexadecimal count as 0.
 * @sign           none
 * @source         As `createStateHash`.
 */
export function hashBytesHex(bytes: Uint8Array, seedHex = ''): string {
  let low = SEED_LOW;
  let high = SEED_HIGH;
  for (let at = 0; at < seedHex.length; at += 8) {
    const word = (Number.parseInt(seedHex.slice(at, at + 8), 16) || 0) | 0;
    low = fold(low, word, 0xcc9e2d51);
    high = fold(high, word, 0x85ebca77);
  }
  let at = 0;
  for (; at + 4 <= bytes.length; at += 4) {
    const word = bytes[at] | (bytes[at + 1] << 8) | (bytes[at + 2] << 16) | (bytes[at + 3] << 24);
    low = fold(low, word, 0xcc9e2d51);
    high = fold(high, word, 0x85ebca77);
  }
  let tail = 0;
  for (let shift = 0; at < bytes.length; at++, shift += 8) tail |= bytes[at] << shift;
  low = fold(fold(low, tail, 0xcc9e2d51), bytes.length, 0xcc9e2d51);
  high = fold(fold(high, tail, 0x85ebca77), bytes.length, 0x85ebca77);
  return hexOf(low, high);
}
