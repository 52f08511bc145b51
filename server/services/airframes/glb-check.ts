/** Whether a file is a self-contained binary glTF 2.0 model that the client can draw. Told by content, never by name. */

const MAGIC = 0x46546c67;
const JSON_CHUNK = 0x4e4f534a;
const BINARY_CHUNK = 0x004e4942;
const VERSION = 2;
const LARGEST_JSON = 2 * 1024 * 1024;
const DEEPEST = 24;
/** Extensions that models may require: materials and transforms need no decoder. */
const EXTENSION = /^KHR_(?:materials_[a-z_]+|texture_transform|mesh_quantization|lights_punctual)$/;
const DATA_IMAGE = /^data:image\/(?:png|jpeg);base64,/;

export type CheckedGlb = { ok: true } | { ok: false; message: string };

const refuse = (message: string): CheckedGlb => ({ ok: false, message });
const member = (value: unknown, name: string): unknown =>
  typeof value === 'object' && value !== null && Object.hasOwn(value, name) ? Reflect.get(value, name) : undefined;
const list = (value: unknown, name: string): unknown[] => {
  const found = member(value, name);
  return Array.isArray(found) ? found : [];
};

export function checkGlb(bytes: Uint8Array): CheckedGlb {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  if (bytes.length < 20 || view.getUint32(0, true) !== MAGIC)
    return refuse('The file is no binary glTF model (.glb). Export it as .glb, glTF 2.0.');
  const version = view.getUint32(4, true);
  if (version !== VERSION) return refuse(`The model is glTF version ${version}; export it as glTF 2.0.`);
  if (view.getUint32(8, true) !== bytes.length)
    return refuse(
      `The model says it has ${view.getUint32(8, true)} bytes, but ${bytes.length} arrived. Export it again.`,
    );
  const jsonLength = view.getUint32(12, true);
  if (view.getUint32(16, true) !== JSON_CHUNK || 20 + jsonLength > bytes.length)
    return refuse('The model does not begin with its description. Export it again.');
  if (jsonLength > LARGEST_JSON) return refuse('The model’s description is larger than 2 MB. Simplify the model.');
  let at = 20 + jsonLength;
  let binary = 0;
  while (at < bytes.length) {
    if (at + 8 > bytes.length || at + 8 + view.getUint32(at, true) > bytes.length)
      return refuse('A part of the model reaches beyond the end of the file. Export it again.');
    if (view.getUint32(at + 4, true) === BINARY_CHUNK && binary === 0) binary = view.getUint32(at, true);
    at += 8 + view.getUint32(at, true);
  }
  let description: unknown;
  try {
    description = JSON.parse(new TextDecoder('utf-8', { fatal: true }).decode(bytes.subarray(20, 20 + jsonLength)));
  } catch {
    return refuse('The model’s description cannot be read. Export it again.');
  }
  return checkDescription(description, binary);
}

function checkDescription(description: unknown, binary: number): CheckedGlb {
  const version = member(member(description, 'asset'), 'version');
  if (typeof version !== 'string' || !version.startsWith('2.'))
    return refuse('The model’s description names no glTF 2 version. Export it as glTF 2.0.');
  const foreign = outsideAddress(description, 0);
  if (foreign !== null) return refuse(`The model refers to ${foreign}. Export it as one file with its images inside.`);
  const required = list(description, 'extensionsRequired').find(
    (name) => typeof name !== 'string' || !EXTENSION.test(name),
  );
  if (required !== undefined)
    return refuse(
      `The model needs the extension “${String(required).slice(0, 60)}”, which is not drawn here. Export it without compression.`,
    );
  const buffers = list(description, 'buffers');
  if (buffers.length > 1) return refuse('The model has several buffers. Export it as one binary file.');
  const length = member(buffers[0], 'byteLength');
  if (buffers.length === 1 && (typeof length !== 'number' || length > binary))
    return refuse('The model’s buffer is larger than what the file holds. Export it again.');
  for (const bufferView of list(description, 'bufferViews')) {
    const offset = member(bufferView, 'byteOffset') ?? 0;
    const size = member(bufferView, 'byteLength');
    if (typeof offset !== 'number' || typeof size !== 'number' || offset < 0 || size < 0 || offset + size > binary)
      return refuse('A part of the model lies outside its buffer. Export it again.');
  }
  for (const image of list(description, 'images')) {
    const type = member(image, 'mimeType');
    if (member(image, 'bufferView') !== undefined && type !== 'image/png' && type !== 'image/jpeg')
      return refuse('An image of the model is neither PNG nor JPEG. Export it with one of these.');
  }
  if (list(description, 'meshes').length === 0) return refuse('The model has no mesh to draw.');
  return { ok: true };
}

/** The first address of anything outside the file, in words; null when there is none. */
function outsideAddress(value: unknown, depth: number): string | null {
  if (typeof value !== 'object' || value === null) return null;
  if (depth > DEEPEST) return 'itself more deeply than any model does';
  for (const [name, inner] of Object.entries(value)) {
    if (name === 'uri' && !(typeof inner === 'string' && DATA_IMAGE.test(inner)))
      return typeof inner === 'string' ? `another file (“${inner.slice(0, 60)}”)` : 'another file';
    const found = outsideAddress(inner, depth + 1);
    if (found !== null) return found;
  }
  return null;
}
