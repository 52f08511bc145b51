import { Inflate } from 'fflate';
import { SheetRefusal } from './sheet-refusal.ts';

/** What the entries of a workbook may unpack to together; bytes. */
export const LARGEST_UNPACKED = 32 * 1024 * 1024;
const MOST_ENTRIES = 2000;
const END_OF_DIRECTORY = 0x06054b50;
const DIRECTORY_ENTRY = 0x02014b50;
const LOCAL_HEADER = 0x04034b50;
const STORED = 0;
const DEFLATED = 8;
/** Compressed bytes handed over at a time: what one step can unpack to stays small. */
const STEP = 8 * 1024;

interface Entry {
  name: string;
  method: number;
  flags: number;
  packed: number;
  unpacked: number;
  offset: number;
}

const damaged = (): SheetRefusal =>
  new SheetRefusal('The workbook is damaged: its directory cannot be read. Open it, save it again and send that.');
const tooLarge = (): SheetRefusal =>
  new SheetRefusal(
    `The workbook unpacks to more than ${LARGEST_UNPACKED / 1024 / 1024} MB and is not opened. Send the sheet with the airframe alone.`,
  );

/**
 * The wanted entries of a zip file, unpacked. Sizes are counted as declared and again while unpacking, so that neither a
 * large file nor one that lies about its size is unpacked beyond the limit.
 *
 * @throws {SheetRefusal}
 */
export function readZipEntries(bytes: Uint8Array, wanted: (name: string) => boolean): Map<string, Uint8Array> {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const entries = directory(view, bytes);
  if (entries.reduce((sum, entry) => sum + entry.unpacked, 0) > LARGEST_UNPACKED) throw tooLarge();
  let left = LARGEST_UNPACKED;
  const out = new Map<string, Uint8Array>();
  for (const entry of entries) {
    if (!wanted(entry.name)) continue;
    if ((entry.flags & 1) !== 0)
      throw new SheetRefusal('The workbook is encrypted. Save it without a password and send that.');
    if (out.has(entry.name)) throw damaged();
    const content = unpack(packedBytes(view, bytes, entry), entry, left);
    left -= content.length;
    out.set(entry.name, content);
  }
  return out;
}

/** The central directory: what readers of zip files go by. */
function directory(view: DataView, bytes: Uint8Array): Entry[] {
  let end = bytes.length - 22;
  const lowest = Math.max(0, end - 0xffff);
  while (end >= lowest && view.getUint32(end, true) !== END_OF_DIRECTORY) end--;
  if (end < lowest || end < 0) throw damaged();
  const count = view.getUint16(end + 10, true);
  if (count > MOST_ENTRIES)
    throw new SheetRefusal(
      `The workbook has ${count} parts; at most ${MOST_ENTRIES} are opened. Send the sheet with the airframe alone.`,
    );
  const entries: Entry[] = [];
  let at = view.getUint32(end + 16, true);
  for (let i = 0; i < count; i++) {
    if (at + 46 > bytes.length || view.getUint32(at, true) !== DIRECTORY_ENTRY) throw damaged();
    const nameLength = view.getUint16(at + 28, true);
    entries.push({
      flags: view.getUint16(at + 8, true),
      method: view.getUint16(at + 10, true),
      packed: view.getUint32(at + 20, true),
      unpacked: view.getUint32(at + 24, true),
      offset: view.getUint32(at + 42, true),
      name: new TextDecoder().decode(bytes.subarray(at + 46, at + 46 + nameLength)),
    });
    at += 46 + nameLength + view.getUint16(at + 30, true) + view.getUint16(at + 32, true);
  }
  return entries;
}

function packedBytes(view: DataView, bytes: Uint8Array, { offset, packed }: Entry): Uint8Array {
  if (offset + 30 > bytes.length || view.getUint32(offset, true) !== LOCAL_HEADER) throw damaged();
  const start = offset + 30 + view.getUint16(offset + 26, true) + view.getUint16(offset + 28, true);
  if (start + packed > bytes.length) throw damaged();
  return bytes.subarray(start, start + packed);
}

function unpack(packed: Uint8Array, { method, unpacked }: Entry, limit: number): Uint8Array {
  if (method === STORED) {
    if (packed.length > limit) throw tooLarge();
    return packed;
  }
  if (method !== DEFLATED) throw damaged();
  const parts: Uint8Array[] = [];
  let size = 0;
  const inflate = new Inflate((part) => {
    size += part.length;
    if (size > limit || size > unpacked) throw size > limit ? tooLarge() : damaged();
    parts.push(part);
  });
  try {
    for (let at = 0; at < packed.length; at += STEP)
      inflate.push(packed.subarray(at, at + STEP), at + STEP >= packed.length);
  } catch (error) {
    throw error instanceof SheetRefusal ? error : damaged();
  }
  if (size !== unpacked) throw damaged();
  const whole = new Uint8Array(size);
  let at = 0;
  for (const part of parts) {
    whole.set(part, at);
    at += part.length;
  }
  return whole;
}
