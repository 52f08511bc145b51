/** Flat convex polygons as a mesh: triangles for WebGL, whole outlines for the CPU renderer, which then shows no seams. */
import { BufferAttribute, BufferGeometry, Mesh, type MeshBasicMaterial } from 'three';

/** Outlines of a geometry: index of the first vertex and number of vertices, in pairs. */
export type Outlines = Int32Array;

export class ConvexMesh {
  readonly object: Mesh<BufferGeometry, MeshBasicMaterial>;
  readonly positions: Float32Array;
  private readonly attribute: BufferAttribute;

  /** All polygons have `corners` corners; `capacity` polygons fit. */
  constructor(
    readonly capacity: number,
    readonly corners: number,
    material: MeshBasicMaterial,
  ) {
    const geometry = new BufferGeometry();
    this.positions = new Float32Array(capacity * corners * 3);
    this.attribute = new BufferAttribute(this.positions, 3);
    geometry.setAttribute('position', this.attribute);
    const index: number[] = [];
    const outlines = new Int32Array(capacity * 2);
    for (let p = 0; p < capacity; p++) {
      const first = p * corners;
      outlines[2 * p] = first;
      outlines[2 * p + 1] = corners;
      for (let i = 1; i + 1 < corners; i++) index.push(first, first + i, first + i + 1);
    }
    geometry.setIndex(index);
    geometry.userData['outlines'] = outlines;
    this.object = new Mesh(geometry, material);
    this.object.frustumCulled = false;
    this.object.raycast = () => undefined;
    this.show(capacity);
  }

  /** Shows the first `count` polygons. */
  show(count: number): void {
    this.object.geometry.setDrawRange(0, count * (this.corners - 2) * 3);
    this.object.geometry.userData['outlineCount'] = count;
    this.object.visible = count > 0;
  }

  setCorner(polygon: number, corner: number, x: number, y: number, z: number): void {
    const at = 3 * (polygon * this.corners + corner);
    this.positions[at] = x;
    this.positions[at + 1] = y;
    this.positions[at + 2] = z;
  }

  commit(): void {
    this.attribute.needsUpdate = true;
  }

  dispose(): void {
    this.object.geometry.dispose();
  }
}

/** Outlines of a mesh that has them and their number, or null. */
export function outlinesOf(geometry: BufferGeometry): { outlines: Outlines; count: number } | null {
  const outlines: unknown = geometry.userData['outlines'];
  const count: unknown = geometry.userData['outlineCount'];
  return outlines instanceof Int32Array && typeof count === 'number' ? { outlines, count } : null;
}
