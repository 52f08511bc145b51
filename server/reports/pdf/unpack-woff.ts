import { inflateSync } from 'node:zlib';

const WOFF = 0x774f4646;
const WOFF_HEADER = 44;
const WOFF_ENTRY = 20;
const SFNT_HEADER = 12;
const SFNT_ENTRY = 16;

/**
 * The font of a WOFF file with its tables unpacked (an SFNT, as TrueType and OpenType files are). Whoever reads glyphs from a
 * packed one unpacks the same tables again and again.
 *
 * @throws {Error} when the file is no WOFF 1.0
 */
export function unpackWoff(woff: Buffer): Buffer {
  if (woff.readUInt32BE(0) !== WOFF) throw new Error('The font is no WOFF file.');
  const count = woff.readUInt16BE(12);
  const head = Buffer.alloc(SFNT_HEADER + SFNT_ENTRY * count);
  const power = Math.floor(Math.log2(count));
  head.writeUInt32BE(woff.readUInt32BE(4), 0);
  head.writeUInt16BE(count, 4);
  head.writeUInt16BE(2 ** power * SFNT_ENTRY, 6);
  head.writeUInt16BE(power, 8);
  head.writeUInt16BE((count - 2 ** power) * SFNT_ENTRY, 10);
  const tables: Buffer[] = [];
  let offset = head.length;
  for (let i = 0; i < count; i++) {
    const entry = woff.subarray(WOFF_HEADER + i * WOFF_ENTRY);
    const [from, packed, size] = [entry.readUInt32BE(4), entry.readUInt32BE(8), entry.readUInt32BE(12)];
    const content = woff.subarray(from, from + packed);
    const table = packed < size ? inflateSync(content) : content;
    const at = SFNT_HEADER + i * SFNT_ENTRY;
    entry.copy(head, at, 0, 4);
    head.writeUInt32BE(entry.readUInt32BE(16), at + 4);
    head.writeUInt32BE(offset, at + 8);
    head.writeUInt32BE(size, at + 12);
    const padding = Buffer.alloc((4 - (size % 4)) % 4);
    tables.push(table, padding);
    offset += size + padding.length;
  }
  return Buffer.concat([head, ...tables]);
}
