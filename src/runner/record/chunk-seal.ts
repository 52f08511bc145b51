/**
 * Chunks kept in the browser are sealed with a key that only the server gives out, and only to the person who flew:
 * the next person who signs in here cannot read them, and an altered chunk does not open.
 * (Web Crypto is absent on a school server without HTTPS, hence a library.)
 */
import { xchacha20poly1305 } from '@noble/ciphers/chacha.js';

const NONCE_BYTES = 24;

export interface ChunkSeal {
  close(index: number, hash: string, bytes: Uint8Array): Uint8Array<ArrayBuffer>;
  /** Null when the sealed bytes were altered or belong elsewhere. */
  open(index: number, hash: string, sealed: Uint8Array): Uint8Array<ArrayBuffer> | null;
}

/** @param chunkKey  Sixteen hexadecimal digits that the server issued with the attempt. */
export function createChunkSeal(
  attemptId: string,
  chunkKey: string,
  random: (length: number) => Uint8Array = (length) => crypto.getRandomValues(new Uint8Array(length)),
): ChunkSeal {
  const text = new TextEncoder();
  const key = text.encode(chunkKey + chunkKey);
  // The place of the chunk is sealed in too, so that chunks cannot be exchanged.
  const place = (index: number, hash: string): Uint8Array => text.encode(`${attemptId}/${index}/${hash}`);
  return {
    close(index, hash, bytes) {
      const nonce = random(NONCE_BYTES);
      const body = xchacha20poly1305(key, nonce, place(index, hash)).encrypt(bytes);
      const sealed = new Uint8Array(NONCE_BYTES + body.length);
      sealed.set(nonce);
      sealed.set(body, NONCE_BYTES);
      return sealed;
    },
    open(index, hash, sealed) {
      if (sealed.length <= NONCE_BYTES) return null;
      try {
        const nonce = sealed.subarray(0, NONCE_BYTES);
        return new Uint8Array(xchacha20poly1305(key, nonce, place(index, hash)).decrypt(sealed.subarray(NONCE_BYTES)));
      } catch {
        return null; // the tag does not fit: altered, or another person's
      }
    },
  };
}
