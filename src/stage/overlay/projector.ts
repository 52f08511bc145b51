/** Scene points to CSS pixels of the picture. */
import { Matrix4, type PerspectiveCamera, type Vector3 } from 'three';

export class Projector {
  width = 0;
  height = 0;
  /** Last point projected. */
  x = 0;
  y = 0;
  private readonly matrix = new Matrix4();
  private near = 0.1;

  set(camera: PerspectiveCamera, width: number, height: number): void {
    this.width = width;
    this.height = height;
    this.near = camera.near;
    this.matrix.multiplyMatrices(camera.projectionMatrix, camera.matrixWorldInverse);
  }

  /** Puts the point into `x`, `y`; false when it lies behind the eye. */
  project(point: Vector3): boolean {
    const m = this.matrix.elements;
    const { x, y, z } = point;
    const w = m[3] * x + m[7] * y + m[11] * z + m[15];
    if (w < this.near) return false;
    this.x = (0.5 + (0.5 * (m[0] * x + m[4] * y + m[8] * z + m[12])) / w) * this.width;
    this.y = (0.5 - (0.5 * (m[1] * x + m[5] * y + m[9] * z + m[13])) / w) * this.height;
    return true;
  }
}
