/** Frames of inputs between the chunks: a few ticks of whoever everybody sees, as text. The form is that of a chunk. */
import { decodeBytes, encodeChunk, type ChunkContent } from './chunk-codec.ts';

/** Most ticks in a frame: a tenth of a second. */
export const LARGEST_FRAME_TICKS = 12;
/** Ticks that a sender puts into one frame: thirty frames a second. */
export const FRAME_TICKS = 4;

export interface InputFrame {
  /** Branch of the class's run that the ticks belong to. */
  branch: number;
  startTick: number;
  tickCount: number;
  /** Running hash of the state after the last tick; null where it was not asked for. */
  stateHash: string | null;
  content: ChunkContent;
}

const NO_HASH = '0000000000000000';
const ALPHABET = 'ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789+/';

export function toBase64(bytes: Uint8Array): string {
  let text = '';
  for (let i = 0; i < bytes.length; i += 3) {
    const left = bytes.length - i;
    const three = (bytes[i] << 16) | ((left > 1 ? bytes[i + 1] : 0) << 8) | (left > 2 ? bytes[i + 2] : 0);
    text += ALPHABET[three >> 18] + ALPHABET[(three >> 12) & 63];
    text += left > 1 ? ALPHABET[(three >> 6) & 63] : '=';
    text += left > 2 ? ALPHABET[three & 63] : '=';
  }
  return text;
}

/** The bytes of a base64 text; null when it is none. */
export function fromBase64(text: string): Uint8Array<ArrayBuffer> | null {
  if (text.length % 4 !== 0) return null;
  const padding = text.endsWith('==') ? 2 : text.endsWith('=') ? 1 : 0;
  const bytes = new Uint8Array((text.length / 4) * 3 - padding);
  let at = 0;
  for (let i = 0; i < text.length; i += 4) {
    let four = 0;
    for (let k = 0; k < 4; k += 1) {
      const letter = text[i + k];
      const last = letter === '=' && i + 4 === text.length && k >= 4 - padding;
      const value = last ? 0 : ALPHABET.indexOf(letter);
      if (value < 0) return null;
      four = (four << 6) | value;
    }
    if (at < bytes.length) bytes[at++] = four >> 16;
    if (at < bytes.length) bytes[at++] = (four >> 8) & 255;
    if (at < bytes.length) bytes[at++] = four & 255;
  }
  return bytes;
}

export function encodeFrame(frame: {
  branch: number;
  startTick: number;
  tickCount: number;
  engineCount: number;
  channels: Int16Array[];
  stateHash: string | null;
}): string {
  const { branch, startTick, tickCount, engineCount, channels, stateHash } = frame;
  return toBase64(
    encodeChunk({
      index: branch,
      startTick,
      tickCount,
      engineCount,
      stateHash: stateHash ?? NO_HASH,
      channels,
      marks: [],
    }),
  );
}

/** The frame of a text that came from anywhere; null when it is none. */
export function decodeFrame(text: string, engineCount: number): InputFrame | null {
  const bytes = fromBase64(text);
  const decoded = bytes === null ? null : decodeBytes(bytes, engineCount);
  if (decoded === null || !decoded.ok) return null;
  const { content } = decoded;
  const { index, startTick, tickCount, stateHash, marks } = content;
  if (tickCount === 0 || tickCount > LARGEST_FRAME_TICKS || marks.length > 0) return null;
  return { branch: index, startTick, tickCount, stateHash: stateHash === NO_HASH ? null : stateHash, content };
}
