/** A binary glTF file of a description and a buffer, well-formed unless the caller says otherwise. */
export function glbFile(description: object, buffer = Buffer.alloc(36), version = 2): Buffer {
  const json = Buffer.from(JSON.stringify(description));
  const padded = Buffer.concat([json, Buffer.alloc((4 - (json.length % 4)) % 4, ' ')]);
  const chunk = (type: number, content: Buffer): Buffer => {
    const head = Buffer.alloc(8);
    head.writeUInt32LE(content.length, 0);
    head.writeUInt32LE(type, 4);
    return Buffer.concat([head, content]);
  };
  const body = Buffer.concat([chunk(0x4e4f534a, padded), chunk(0x004e4942, buffer)]);
  const head = Buffer.alloc(12);
  head.write('glTF', 'latin1');
  head.writeUInt32LE(version, 4);
  head.writeUInt32LE(12 + body.length, 8);
  return Buffer.concat([head, body]);
}

/** One triangle. */
export const TRIANGLE = {
  asset: { version: '2.0' },
  buffers: [{ byteLength: 36 }],
  bufferViews: [{ buffer: 0, byteLength: 36 }],
  accessors: [{ bufferView: 0, componentType: 5126, count: 3, type: 'VEC3', min: [0, 0, 0], max: [1, 1, 0] }],
  meshes: [{ primitives: [{ attributes: { POSITION: 0 } }] }],
  nodes: [{ mesh: 0 }],
  scenes: [{ nodes: [0] }],
  scene: 0,
};
