/** Plain facets in body axes (x forward, y right, z down; m), each a planar polygon seen counter-clockwise from outside. */

/** Toned facets take one of the paper tones; ink facets (windscreen) are solid. */
export type FacetPaint = 'toned' | 'ink';

export interface Facet {
  corners: number[];
  paint: FacetPaint;
}

export interface FacetMesh {
  /** x, y, z per vertex. */
  positions: number[];
  facets: Facet[];
}

type Point = readonly [number, number, number];

/** Collects facets; equal points become one vertex, so that neighbours share their edges. */
export class FacetBuilder {
  readonly mesh: FacetMesh = { positions: [], facets: [] };
  private readonly known = new Map<string, number>();

  vertex(point: Point): number {
    const key = `${Math.round(point[0] * 1e5)},${Math.round(point[1] * 1e5)},${Math.round(point[2] * 1e5)}`;
    const found = this.known.get(key);
    if (found !== undefined) return found;
    const index = this.mesh.positions.length / 3;
    this.mesh.positions.push(point[0], point[1], point[2]);
    this.known.set(key, index);
    return index;
  }

  /** Adds a facet whose outward side looks along `outward`; the corners are turned round when they do not. */
  facet(points: readonly Point[], outward: Point, paint: FacetPaint = 'toned'): void {
    const corners: number[] = [];
    for (const point of points) {
      const vertex = this.vertex(point);
      if (corners[corners.length - 1] !== vertex && corners[0] !== vertex) corners.push(vertex);
    }
    if (corners.length < 3) return;
    const [nx, ny, nz] = facetNormal(this.mesh.positions, corners);
    if (nx * outward[0] + ny * outward[1] + nz * outward[2] < 0) corners.reverse();
    this.mesh.facets.push({ corners, paint });
  }
}

/** Unit outward normal of a polygon by Newell's sum, so that slightly bent facets are fine. */
export function facetNormal(positions: readonly number[], corners: readonly number[]): [number, number, number] {
  let x = 0;
  let y = 0;
  let z = 0;
  for (let i = 0; i < corners.length; i++) {
    const a = corners[i] * 3;
    const b = corners[(i + 1) % corners.length] * 3;
    x += (positions[a + 1] - positions[b + 1]) * (positions[a + 2] + positions[b + 2]);
    y += (positions[a + 2] - positions[b + 2]) * (positions[a] + positions[b]);
    z += (positions[a] - positions[b]) * (positions[a + 1] + positions[b + 1]);
  }
  const length = Math.hypot(x, y, z) || 1;
  return [x / length, y / length, z / length];
}
