/** Line segments of a set width whose number changes each frame, on one preallocated buffer. */
import { DynamicDrawUsage, InstancedInterleavedBuffer, InterleavedBufferAttribute } from 'three';
import type { LineMaterial } from 'three/examples/jsm/lines/LineMaterial.js';
import { LineSegments2 } from 'three/examples/jsm/lines/LineSegments2.js';
import { LineSegmentsGeometry } from 'three/examples/jsm/lines/LineSegmentsGeometry.js';

export class DynamicSegments {
  readonly object: LineSegments2;
  private readonly geometry = new LineSegmentsGeometry();
  private readonly array: Float32Array;
  private readonly buffer: InstancedInterleavedBuffer;
  private count = 0;

  constructor(
    readonly capacity: number,
    material: LineMaterial,
  ) {
    this.array = new Float32Array(Math.max(1, capacity) * 6);
    this.buffer = new InstancedInterleavedBuffer(this.array, 6, 1);
    this.buffer.setUsage(DynamicDrawUsage);
    this.geometry.setAttribute('instanceStart', new InterleavedBufferAttribute(this.buffer, 3, 0));
    this.geometry.setAttribute('instanceEnd', new InterleavedBufferAttribute(this.buffer, 3, 3));
    this.geometry.instanceCount = 0;
    this.object = new LineSegments2(this.geometry, material);
    this.object.frustumCulled = false;
    this.object.raycast = () => undefined;
  }

  clear(): void {
    this.count = 0;
  }

  /** Adds a segment; segments beyond the capacity are left out. */
  add(x0: number, y0: number, z0: number, x1: number, y1: number, z1: number): void {
    if (this.count >= this.capacity) return;
    const at = 6 * this.count++;
    this.array[at] = x0;
    this.array[at + 1] = y0;
    this.array[at + 2] = z0;
    this.array[at + 3] = x1;
    this.array[at + 4] = y1;
    this.array[at + 5] = z1;
  }

  /** Hands what was added since `clear` to the renderers. */
  commit(): void {
    this.geometry.instanceCount = this.count;
    this.object.visible = this.count > 0;
    this.buffer.needsUpdate = true;
  }

  dispose(): void {
    this.geometry.dispose();
  }
}
