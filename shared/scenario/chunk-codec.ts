/**
 * Bytes of one recorded chunk: a header, every channel delta-coded from zero with zig-zag variable-length integers and runs
 * of zeros counted, then the clock marks. Little-endian. Held controls cost a few bytes a second.
 */
import type { ControlSample } from './run-types.ts';

export const CHUNK_MAGIC = 0x43525753; // "SWRC", read as a little-endian number
export const CHUNK_VERSION = 1;
/** A chunk holds at most one second; the last of a branch may be shorter. */
export const LARGEST_CHUNK_TICKS = 120;
export const LARGEST_CHUNK_MARKS = 500;
export const LARGEST_ENGINE_COUNT = 8;
export const LARGEST_BRANCH = 10_000;
/** More than any chunk can need: four axes and eight engines that change every tick, and the marks. */
export const LARGEST_CHUNK_BYTES = 32_768;

const HEADER_BYTES = 26;
const MARK_BYTES = 13;
/** A `branch` mark before a `rewind` names the branch of a class that begins there. */
export const MARK_KINDS = ['freeze', 'resume', 'rate', 'rewind', 'branch'] as const;
export type MarkKind = (typeof MARK_KINDS)[number];

export interface ClockMark {
  kind: MarkKind;
  /** Tick at which it happened. */
  tick: number;
  /** The rate, the tick rewound to, or the number of the branch. */
  value?: number;
}

export interface ChunkContent {
  index: number;
  startTick: number;
  tickCount: number;
  engineCount: number;
  /** Running state hash after the last tick; 16 hexadecimal digits. */
  stateHash: string;
  /** One array per channel: stick, pedal, pitch, rudder trim, a lever per engine, a feather switch per engine. */
  channels: Int16Array[];
  marks: ClockMark[];
}

/** Channels of an aeroplane with so many engines. */
export const channelCount = (engineCount: number): number => 4 + 2 * engineCount;

/** Writes one tick of a chunk into a control sample. */
export function readSampleInto(sample: ControlSample, content: ChunkContent, i: number): void {
  const { channels, engineCount } = content;
  sample.stick = channels[0][i];
  sample.pedal = channels[1][i];
  sample.pitch = channels[2][i];
  sample.rudderTrim = channels[3][i];
  for (let e = 0; e < engineCount; e++) {
    sample.levers[e] = channels[4 + e][i];
    sample.feather[e] = channels[4 + engineCount + e][i];
  }
}

class ByteWriter {
  private bytes = new Uint8Array(1024);
  private view = new DataView(this.bytes.buffer);
  length = 0;

  private room(more: number): void {
    if (this.length + more <= this.bytes.length) return;
    const larger = new Uint8Array(2 * (this.bytes.length + more));
    larger.set(this.bytes);
    this.bytes = larger;
    this.view = new DataView(larger.buffer);
  }
  u8(value: number): void {
    this.room(1);
    this.view.setUint8(this.length, value);
    this.length += 1;
  }
  u16(value: number): void {
    this.room(2);
    this.view.setUint16(this.length, value, true);
    this.length += 2;
  }
  u32(value: number): void {
    this.room(4);
    this.view.setUint32(this.length, value, true);
    this.length += 4;
  }
  f64(value: number): void {
    this.room(8);
    this.view.setFloat64(this.length, value, true);
    this.length += 8;
  }
  varint(value: number): void {
    let rest = value >>> 0;
    while (rest >= 0x80) {
      this.u8((rest & 0x7f) | 0x80);
      rest >>>= 7;
    }
    this.u8(rest);
  }
  done(): Uint8Array<ArrayBuffer> {
    return this.bytes.slice(0, this.length);
  }
}

/** The bytes of a chunk. Values are the recorder's own and are not checked again. */
export function encodeChunk(content: ChunkContent): Uint8Array<ArrayBuffer> {
  const out = new ByteWriter();
  out.u32(CHUNK_MAGIC);
  out.u8(CHUNK_VERSION);
  out.u8(content.engineCount);
  out.u32(content.index);
  out.u32(content.startTick);
  out.u16(content.tickCount);
  out.u16(content.marks.length);
  for (let i = 0; i < 16; i += 2) out.u8(Number.parseInt(content.stateHash.slice(i, i + 2), 16));
  for (const channel of content.channels) {
    let last = 0;
    let zeros = 0;
    for (let i = 0; i < content.tickCount; i++) {
      const delta = channel[i] - last;
      last = channel[i];
      if (delta === 0) {
        zeros++;
        continue;
      }
      if (zeros > 0) {
        out.varint(0);
        out.varint(zeros);
        zeros = 0;
      }
      out.varint(delta > 0 ? 2 * delta : -2 * delta - 1);
    }
    if (zeros > 0) {
      out.varint(0);
      out.varint(zeros);
    }
  }
  for (const mark of content.marks) {
    out.u8(MARK_KINDS.indexOf(mark.kind));
    out.u32(mark.tick);
    out.f64(mark.value ?? 0);
  }
  return out.done();
}

export type DecodedChunk = { ok: true; content: ChunkContent } | { ok: false; reason: string };

/**
 * The content of a chunk's bytes. Bytes come from anywhere: nothing is trusted, nothing is read past the end.
 *
 * @param bytes        The bytes.
 * @param engineCount  How many engines the attempt's airframe has.
 * @returns            The content, or in words what is wrong with the bytes.
 */
export function decodeBytes(bytes: Uint8Array, engineCount: number): DecodedChunk {
  const refuse = (reason: string): DecodedChunk => ({ ok: false, reason });
  if (bytes.length > LARGEST_CHUNK_BYTES)
    return refuse(`${bytes.length} bytes are more than a chunk can have (${LARGEST_CHUNK_BYTES})`);
  if (bytes.length < HEADER_BYTES) return refuse(`${bytes.length} bytes are too few for a chunk`);
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  if (view.getUint32(0, true) !== CHUNK_MAGIC) return refuse('the bytes are not a recording');
  if (view.getUint8(4) !== CHUNK_VERSION)
    return refuse(`version ${view.getUint8(4)} of the recording is not known here`);
  if (view.getUint8(5) !== engineCount)
    return refuse(`it was recorded with ${view.getUint8(5)} engines; the airframe has ${engineCount}`);
  const tickCount = view.getUint16(14, true);
  const markCount = view.getUint16(16, true);
  if (tickCount > LARGEST_CHUNK_TICKS)
    return refuse(`${tickCount} ticks are more than a chunk holds (${LARGEST_CHUNK_TICKS})`);
  if (markCount > LARGEST_CHUNK_MARKS)
    return refuse(`${markCount} clock marks are more than a chunk holds (${LARGEST_CHUNK_MARKS})`);
  if (tickCount === 0 && markCount === 0) return refuse('the chunk is empty');
  let stateHash = '';
  for (let i = 18; i < HEADER_BYTES; i++) stateHash += view.getUint8(i).toString(16).padStart(2, '0');

  let at = HEADER_BYTES;
  /** −1 where the bytes end or the number is too long. */
  const varint = (): number => {
    let value = 0;
    for (let shift = 0; shift < 28; shift += 7) {
      if (at >= bytes.length) return -1;
      const byte = bytes[at++];
      value |= (byte & 0x7f) << shift;
      if (byte < 0x80) return value;
    }
    return -1;
  };
  const channels: Int16Array[] = [];
  for (let c = 0; c < channelCount(engineCount); c++) {
    const channel = new Int16Array(tickCount);
    let last = 0;
    let i = 0;
    while (i < tickCount) {
      const token = varint();
      if (token < 0) return refuse('the bytes end inside a channel');
      if (token === 0) {
        const run = varint();
        if (run <= 0 || i + run > tickCount) return refuse('a run of unchanged values is longer than the chunk');
        channel.fill(last, i, i + run);
        i += run;
        continue;
      }
      last += token % 2 === 0 ? token / 2 : -(token + 1) / 2;
      if (last < -32767 || last > 32767) return refuse('a control value is out of range');
      if (c >= 4 && last < 0) return refuse('a lever or switch is negative');
      if (c >= 4 + engineCount && last > 1) return refuse('a feather switch is neither on nor off');
      channel[i++] = last;
    }
    channels.push(channel);
  }
  const startTick = view.getUint32(10, true);
  const marks: ClockMark[] = [];
  for (let m = 0; m < markCount; m++) {
    if (at + MARK_BYTES > bytes.length) return refuse('the bytes end inside the clock marks');
    const kind = MARK_KINDS[view.getUint8(at)];
    const tick = view.getUint32(at + 1, true);
    const value = view.getFloat64(at + 5, true);
    at += MARK_BYTES;
    if (kind === undefined) return refuse('a clock mark is of no known kind');
    if (!Number.isFinite(value)) return refuse('a clock mark has no finite value');
    if (kind === 'rate' && (value <= 0 || value > 1)) return refuse(`a clock rate of ${value} is not between 0 and 1`);
    if (kind === 'rewind' && (!Number.isInteger(value) || value < 0 || value > tick))
      return refuse('a rewind does not lead back');
    if (kind === 'branch' && (!Number.isInteger(value) || value < 0 || value > LARGEST_BRANCH))
      return refuse('a branch has no such number');
    marks.push(kind === 'freeze' || kind === 'resume' ? { kind, tick } : { kind, tick, value });
  }
  if (at !== bytes.length) return refuse(`${bytes.length - at} bytes are left over`);
  return {
    ok: true,
    content: { index: view.getUint32(6, true), startTick, tickCount, engineCount, stateHash, channels, marks },
  };
}
