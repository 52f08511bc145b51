import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { airframeDetailSchema } from '#shared/contracts/airframe-editing.ts';
import { problemSchema } from '#shared/contracts/problem.ts';
import { glbFile, TRIANGLE } from '../../support/glb-file.ts';
import { type Client, startTestServer, type TestServer } from '../../support/test-server.ts';

let server: TestServer;
let engineer: Client;
const AT = '/api/airframes/light-twin/skin';

beforeAll(async () => {
  server = await startTestServer();
  engineer = await server.client('a.reyes');
});
afterAll(() => server.close());

const upload = (bytes: Uint8Array, name = 'twin.glb') =>
  engineer('PUT', `${AT}?name=${encodeURIComponent(name)}`, { bytes });

describe('a skin', () => {
  it('is kept byte for byte, replaced, served with its type, and removed', async () => {
    const large = glbFile({ ...TRIANGLE, buffers: [{ byteLength: 36 }] }, Buffer.alloc(8 * 1024 * 1024 - 2000, 7));
    expect((await upload(large)).body).toEqual({ bytes: large.length });
    const served = await engineer('GET', AT);
    expect(served.bytes.equals(large)).toBe(true);
    expect(served.headers.get('content-type')).toBe('model/gltf-binary');
    expect(served.headers.get('x-content-type-options')).toBe('nosniff');
    const small = glbFile(TRIANGLE);
    await upload(small, 'C:\\models\\Flügel.glb');
    const detail = airframeDetailSchema.parse((await engineer('GET', '/api/airframes/light-twin')).body);
    expect(detail.skin).toMatchObject({ fileName: 'Flügel.glb', bytes: small.length });
    const again = await engineer('GET', AT);
    expect(again.bytes.equals(small)).toBe(true);
    const tag = again.headers.get('etag') ?? '';
    expect(
      (await engineer('GET', AT, { headers: { 'if-none-match': tag, 'cache-control': 'max-age=0' } })).status,
    ).toBe(304);
    expect((await engineer('DELETE', AT)).status).toBe(204);
    expect((await engineer('GET', AT)).status).toBe(404);
    expect(await server.sql('SELECT COUNT(*) AS n FROM airframe_skin_part')).toEqual([{ n: 0 }]);
  });

  const other = { ...TRIANGLE, images: [{ uri: 'http://example.invalid/track.png' }] };
  const svg = { ...TRIANGLE, images: [{ uri: 'data:image/svg+xml;base64,PHN2Zy8+' }] };
  const packed = { ...TRIANGLE, extensionsRequired: ['KHR_draco_mesh_compression'] };
  const wide = { ...TRIANGLE, bufferViews: [{ buffer: 0, byteLength: 3600 }] };
  it.each([
    ['a picture named .glb', Buffer.from('89504e470d0a1a0a0000000d494844520000', 'hex'), 'no binary glTF model'],
    ['a web page', Buffer.from('<html><script>alert(1)</script></html>'), 'no binary glTF model'],
    ['version 1', glbFile(TRIANGLE, undefined, 1), 'glTF version 1'],
    ['half a file', glbFile(TRIANGLE).subarray(0, 200), 'bytes, but 200 arrived'],
    ['a file with something behind it', Buffer.concat([glbFile(TRIANGLE), Buffer.from('more')]), 'arrived'],
    ['an image elsewhere', glbFile(other), 'refers to another file'],
    ['an image that is a document', glbFile(svg), 'refers to another file'],
    ['compression', glbFile(packed), 'KHR_draco_mesh_compression'],
    ['a view beyond its buffer', glbFile(wide), 'outside its buffer'],
    ['no mesh', glbFile({ ...TRIANGLE, meshes: [] }), 'no mesh'],
    ['a broken description', glbFile(TRIANGLE).fill('{', 20, 40), 'cannot be read'],
  ])('that is %s is refused in words', async (_what, bytes, words) => {
    const answer = await upload(bytes);
    expect(answer.status).toBe(422);
    expect(problemSchema.parse(answer.body).detail).toContain(words);
  });

  it('is refused above 8 MB and as a form', async () => {
    expect((await upload(Buffer.alloc(8 * 1024 * 1024 + 1))).status).toBe(413);
    const form = await engineer('PUT', AT, { bytes: glbFile(TRIANGLE), type: 'multipart/form-data; boundary=x' });
    expect(form.status).toBe(415);
  });
});
