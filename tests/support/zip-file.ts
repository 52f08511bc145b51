import { deflateRawSync } from 'node:zlib';

export interface ZipPart {
  name: string;
  content: Uint8Array;
  /** Size written in place of the true one, as hostile files do. */
  declared?: number;
}

/** A zip file, entry by entry, that may lie about itself. */
export function zipFile(parts: readonly ZipPart[]): Buffer {
  const locals: Buffer[] = [];
  const directory: Buffer[] = [];
  let offset = 0;
  for (const { name, content, declared } of parts) {
    const packed = deflateRawSync(content, { level: 9 });
    const fields = Buffer.alloc(26);
    fields.writeUInt16LE(20, 0);
    fields.writeUInt16LE(8, 4);
    fields.writeUInt32LE(packed.length, 14);
    fields.writeUInt32LE(declared ?? content.length, 18);
    fields.writeUInt16LE(Buffer.byteLength(name), 22);
    const local = Buffer.concat([Buffer.from('PK\x03\x04', 'latin1'), fields, Buffer.from(name), packed]);
    const entry = Buffer.alloc(46);
    entry.write('PK\x01\x02', 'latin1');
    entry.writeUInt16LE(20, 4);
    fields.copy(entry, 6);
    entry.writeUInt32LE(offset, 42);
    locals.push(local);
    directory.push(entry, Buffer.from(name));
    offset += local.length;
  }
  const central = Buffer.concat(directory);
  const end = Buffer.alloc(22);
  end.write('PK\x05\x06', 'latin1');
  end.writeUInt16LE(parts.length, 8);
  end.writeUInt16LE(parts.length, 10);
  end.writeUInt32LE(central.length, 12);
  end.writeUInt32LE(offset, 16);
  return Buffer.concat([...locals, central, end]);
}
