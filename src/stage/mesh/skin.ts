/**
 * An uploaded model as the stage draws it: flat facets in its own colours, scaled to the span, nose where the aeroplane's
 * is. Textures are read once for a colour of each facet, so that both renderers draw the same.
 */
import { BufferAttribute, BufferGeometry, Color, DoubleSide, Group, Mesh, MeshBasicMaterial, Vector3 } from 'three';

/** More triangles than this are not drawn: the CPU renderer would stand still. */
export const MOST_TRIANGLES = 120_000;
/** Toward the lamp in the aeroplane's own axes: left, up, back. As the paper tones of `view/light.ts`. */
const LAMP = new Vector3(-0.5, 0.68, 0.54).normalize();
const SHADE_FLOOR = 0.58;

export class Skin {
  readonly object = new Group();

  constructor(
    private readonly geometry: BufferGeometry,
    private readonly material: MeshBasicMaterial,
    readonly triangles: number,
  ) {
    const mesh = new Mesh(geometry, material);
    mesh.raycast = () => undefined;
    mesh.frustumCulled = false;
    this.object.add(mesh);
  }

  dispose(): void {
    this.object.removeFromParent();
    this.geometry.dispose();
    this.material.dispose();
  }
}

/** @throws {Error} with one sentence for a person when the model cannot be drawn. */
export async function readSkin(file: ArrayBuffer, spanM: number): Promise<Skin> {
  const { GLTFLoader } = await import('three/examples/jsm/loaders/GLTFLoader.js');
  const { scene } = await new GLTFLoader().parseAsync(file, '');
  scene.updateMatrixWorld(true);
  const positions: number[] = [];
  const colours: number[] = [];
  const meshes: Mesh[] = [];
  scene.traverse((child) => {
    if (child instanceof Mesh) meshes.push(child);
  });
  for (const mesh of meshes) {
    addFacets(mesh, positions, colours);
    if (positions.length / 9 > MOST_TRIANGLES)
      throw new Error(`The skin has more than ${MOST_TRIANGLES} triangles. Simplify the model.`);
  }
  for (const mesh of meshes) (mesh.geometry as BufferGeometry).dispose(); // every mesh of a loaded model has one
  if (positions.length === 0) throw new Error('The skin holds no surface that can be drawn.');
  fitTo(positions, spanM);
  const geometry = new BufferGeometry();
  geometry.setAttribute('position', new BufferAttribute(new Float32Array(positions), 3));
  geometry.setAttribute('color', new BufferAttribute(new Float32Array(colours), 3));
  const material = new MeshBasicMaterial({
    vertexColors: true,
    toneMapped: false,
    transparent: true,
    side: DoubleSide,
  });
  return new Skin(geometry, material, positions.length / 9);
}

const corners = [new Vector3(), new Vector3(), new Vector3()];
const normal = new Vector3();
const side = new Vector3();

/** Adds a mesh's triangles in the aeroplane's axes: glTF looks along +Z with Y up, the stage's nose along −Z. */
function addFacets(mesh: Mesh, positions: number[], colours: number[]): void {
  const geometry = mesh.geometry as BufferGeometry; // every mesh of a loaded model has one
  const place = geometry.getAttribute('position');
  const count = geometry.index?.count ?? place.count;
  const colourOf = facetColours(mesh, geometry);
  for (let at = 0; at + 2 < count && positions.length / 9 <= MOST_TRIANGLES; at += 3) {
    const indices = [at, at + 1, at + 2].map((i) => geometry.index?.getX(i) ?? i);
    corners.forEach((corner, i) => {
      corner.fromBufferAttribute(place, indices[i] ?? 0).applyMatrix4(mesh.matrixWorld);
      corner.set(-corner.x, corner.y, -corner.z);
    });
    const [a, b, c] = corners as [Vector3, Vector3, Vector3]; // three, above
    normal.subVectors(b, a).cross(side.subVectors(c, a));
    if (normal.lengthSq() === 0) continue;
    const light = SHADE_FLOOR + (1 - SHADE_FLOOR) * Math.max(0, normal.normalize().dot(LAMP));
    const colour = colourOf(indices);
    for (const corner of corners) {
      positions.push(corner.x, corner.y, corner.z);
      colours.push(colour.r * light, colour.g * light, colour.b * light);
    }
  }
}

/** Screen colour of a facet: its material's base colour, times its texture where the facet's middle lies. */
function facetColours(mesh: Mesh, geometry: BufferGeometry): (indices: readonly number[]) => Color {
  const material: unknown = Array.isArray(mesh.material) ? mesh.material[0] : mesh.material;
  const base = new Color(0.8, 0.8, 0.78);
  const given = member(material, 'color');
  if (given instanceof Color) base.copy(given).convertLinearToSRGB();
  const pixels = texturePixels(member(member(material, 'map'), 'image'));
  const uv = geometry.hasAttribute('uv') ? geometry.getAttribute('uv') : null;
  const out = new Color();
  return (indices) => {
    out.copy(base);
    if (pixels === null || uv === null) return out;
    const mean = (read: (i: number) => number): number => indices.reduce((sum, i) => sum + read(i), 0) / 3;
    const wrap = (value: number): number => value - Math.floor(value);
    const x = Math.min(pixels.width - 1, Math.floor(wrap(mean((i) => uv.getX(i))) * pixels.width));
    const y = Math.min(pixels.height - 1, Math.floor(wrap(mean((i) => uv.getY(i))) * pixels.height));
    const from = 4 * (y * pixels.width + x);
    out.r *= (pixels.data[from] ?? 255) / 255;
    out.g *= (pixels.data[from + 1] ?? 255) / 255;
    out.b *= (pixels.data[from + 2] ?? 255) / 255;
    return out;
  };
}

const member = (value: unknown, name: string): unknown =>
  typeof value === 'object' && value !== null ? Reflect.get(value, name) : undefined;

/** A texture read at most this large: one colour a facet needs no more. */
const TEXTURE_PX = 512;

function texturePixels(image: unknown): ImageData | null {
  const drawable = image instanceof ImageBitmap || image instanceof HTMLImageElement ? image : null;
  if (drawable === null || drawable.width === 0 || drawable.height === 0) return null;
  const canvas = document.createElement('canvas');
  canvas.width = Math.min(TEXTURE_PX, drawable.width);
  canvas.height = Math.min(TEXTURE_PX, drawable.height);
  const context = canvas.getContext('2d');
  if (context === null) return null;
  context.drawImage(drawable, 0, 0, canvas.width, canvas.height);
  return context.getImageData(0, 0, canvas.width, canvas.height);
}

/** Moves the middle of the model to the mass centre and gives it the span of the data. */
function fitTo(positions: number[], spanM: number): void {
  const low = [Infinity, Infinity, Infinity];
  const high = [-Infinity, -Infinity, -Infinity];
  positions.forEach((value, i) => {
    low[i % 3] = Math.min(low[i % 3] ?? value, value);
    high[i % 3] = Math.max(high[i % 3] ?? value, value);
  });
  const width = (high[0] ?? 0) - (low[0] ?? 0);
  const scale = width > 0 ? spanM / width : 1;
  for (let i = 0; i < positions.length; i++) {
    const middle = ((low[i % 3] ?? 0) + (high[i % 3] ?? 0)) / 2;
    positions[i] = ((positions[i] ?? 0) - middle) * scale;
  }
}
