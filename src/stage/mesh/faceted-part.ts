/**
 * One rigid part of the aeroplane as three.js objects: flat facets in paper tones and ink edges.
 * `update` re-tones the facets for a light and picks the edges the eye would draw; it allocates nothing.
 */
import {
  BufferAttribute,
  BufferGeometry,
  DynamicDrawUsage,
  Group,
  Matrix4,
  Mesh,
  type MeshBasicMaterial,
  Vector3,
} from 'three';
import type { LineMaterial } from 'three/examples/jsm/lines/LineMaterial.js';
import { DynamicSegments } from '../render/dynamic-segments.ts';
import type { Rgb } from '../view/palette.ts';
import { type FacetMesh, facetNormal } from './facet-mesh.ts';

/** Dots of facet normal and light above which a facet takes tone 0, 1, 2, 3, 4; below the last, tone 5. */
const TONE_STEPS = [0.56, 0.34, 0.12, -0.1, -0.32] as const;
/** Neighbouring facets that bend more than this carry an ink line when seen: cos of 52°. */
const CREASE_COS = 0.616;

/** Index of the paper tone for the cosine between facet normal and light. */
export function toneFor(cosine: number): number {
  let tone = 0;
  while (tone < TONE_STEPS.length && cosine < TONE_STEPS[tone]) tone++;
  return tone;
}

export interface FacetStyle {
  fill: MeshBasicMaterial;
  edge: LineMaterial;
}

export class FacetedPart {
  readonly object = new Group();
  private readonly facetCount: number;
  private readonly normals: Float32Array;
  private readonly anchors: Float32Array;
  private readonly firstVertex: Int32Array;
  private readonly inked: Uint8Array;
  private readonly tones: Int8Array;
  private readonly facing: Uint8Array;
  /** Per edge: start xyz, end xyz. */
  private readonly edgePoints: Float32Array;
  /** Per edge: facet on one side, facet on the other, 1 when it is a crease. */
  private readonly edgeFacets: Int32Array;
  private readonly geometry = new BufferGeometry();
  private readonly colours: BufferAttribute;
  private readonly lines: DynamicSegments;
  private readonly toLocal = new Matrix4();
  private readonly light = new Vector3();
  private readonly eye = new Vector3();

  constructor(mesh: FacetMesh, style: FacetStyle) {
    const facets = mesh.facets;
    this.facetCount = facets.length;
    this.normals = new Float32Array(facets.length * 3);
    this.anchors = new Float32Array(facets.length * 3);
    this.firstVertex = new Int32Array(facets.length + 1);
    this.inked = new Uint8Array(facets.length);
    this.tones = new Int8Array(facets.length).fill(-1);
    this.facing = new Uint8Array(facets.length);

    const triangles: number[] = [];
    facets.forEach((facet, f) => {
      this.firstVertex[f] = triangles.length;
      for (let i = 1; i + 1 < facet.corners.length; i++)
        triangles.push(facet.corners[0], facet.corners[i], facet.corners[i + 1]);
      const normal = facetNormal(mesh.positions, facet.corners);
      setScene(this.normals, f, normal[0], normal[1], normal[2]);
      const a = facet.corners[0] * 3;
      setScene(this.anchors, f, mesh.positions[a], mesh.positions[a + 1], mesh.positions[a + 2]);
      this.inked[f] = facet.paint === 'ink' ? 1 : 0;
    });
    this.firstVertex[facets.length] = triangles.length;

    const positions = new Float32Array(triangles.length * 3);
    triangles.forEach((v, i) => {
      setScene(positions, i, mesh.positions[v * 3], mesh.positions[v * 3 + 1], mesh.positions[v * 3 + 2]);
    });
    this.geometry.setAttribute('position', new BufferAttribute(positions, 3));
    this.colours = new BufferAttribute(new Float32Array(triangles.length * 3), 3);
    this.colours.setUsage(DynamicDrawUsage);
    this.geometry.setAttribute('color', this.colours);

    const edges = findEdges(mesh);
    this.edgeFacets = Int32Array.from(edges.flatMap((edge) => [edge.one, edge.other, edge.crease ? 1 : 0]));
    this.edgePoints = new Float32Array(edges.length * 6);
    edges.forEach((edge, e) => {
      setScene(this.edgePoints, 2 * e, ...pointOf(mesh, edge.from));
      setScene(this.edgePoints, 2 * e + 1, ...pointOf(mesh, edge.to));
    });

    const fill = new Mesh(this.geometry, style.fill);
    fill.renderOrder = 20;
    fill.frustumCulled = false;
    this.lines = new DynamicSegments(edges.length, style.edge);
    this.lines.object.renderOrder = 21;
    this.object.add(fill, this.lines.object);
  }

  /** Re-tones and re-inks for the world transform it has now. `tones` and `ink` are screen colours. */
  update(lightWorld: Vector3, eyeWorld: Vector3, tones: readonly Rgb[], ink: Rgb): void {
    this.toLocal.copy(this.object.matrixWorld).invert();
    const light = this.light.copy(lightWorld).transformDirection(this.toLocal);
    const eye = this.eye.copy(eyeWorld).applyMatrix4(this.toLocal);
    let changed = false;
    for (let f = 0; f < this.facetCount; f++) {
      const nx = this.normals[3 * f];
      const ny = this.normals[3 * f + 1];
      const nz = this.normals[3 * f + 2];
      const toEye =
        nx * (eye.x - this.anchors[3 * f]) +
        ny * (eye.y - this.anchors[3 * f + 1]) +
        nz * (eye.z - this.anchors[3 * f + 2]);
      this.facing[f] = toEye > 0 ? 1 : 0;
      if (toEye <= 0) continue;
      const tone = this.inked[f] === 1 ? 6 : toneFor(nx * light.x + ny * light.y + nz * light.z);
      if (tone === this.tones[f]) continue;
      this.tones[f] = tone;
      this.paint(f, tone === 6 ? ink : tones[tone]);
      changed = true;
    }
    if (changed) this.colours.needsUpdate = true;
    this.pickEdges();
  }

  /** Forgets which colours are on, after a change of theme. */
  repaint(): void {
    this.tones.fill(-1);
  }

  dispose(): void {
    this.geometry.dispose();
    this.lines.dispose();
  }

  private paint(facet: number, colour: Rgb): void {
    const array = this.colours.array;
    for (let v = this.firstVertex[facet]; v < this.firstVertex[facet + 1]; v++) {
      array[3 * v] = colour.r;
      array[3 * v + 1] = colour.g;
      array[3 * v + 2] = colour.b;
    }
  }

  private pickEdges(): void {
    this.lines.clear();
    const count = this.edgeFacets.length / 3;
    for (let e = 0; e < count; e++) {
      const one = this.facing[this.edgeFacets[3 * e]];
      const other = this.facing[this.edgeFacets[3 * e + 1]];
      // the outline, or a crease with a visible side
      if (one === other && (one === 0 || this.edgeFacets[3 * e + 2] === 0)) continue;
      const p = this.edgePoints;
      const at = 6 * e;
      this.lines.add(p[at], p[at + 1], p[at + 2], p[at + 3], p[at + 4], p[at + 5]);
    }
    this.lines.commit();
  }
}

/** Body axes to the scene's: X right, Y up, Z aft. */
function setScene(out: Float32Array, index: number, x: number, y: number, z: number): void {
  out[3 * index] = y;
  out[3 * index + 1] = -z;
  out[3 * index + 2] = -x;
}

const pointOf = (mesh: FacetMesh, vertex: number): [number, number, number] => [
  mesh.positions[3 * vertex],
  mesh.positions[3 * vertex + 1],
  mesh.positions[3 * vertex + 2],
];

interface Edge {
  from: number;
  to: number;
  one: number;
  other: number;
  crease: boolean;
}

/** Edges that two facets share; open edges lie inside other parts and are never drawn. */
function findEdges(mesh: FacetMesh): Edge[] {
  const open = new Map<string, { from: number; to: number; facet: number }>();
  const edges: Edge[] = [];
  mesh.facets.forEach((facet, f) => {
    facet.corners.forEach((from, i) => {
      const to = facet.corners[(i + 1) % facet.corners.length];
      const key = from < to ? `${from} ${to}` : `${to} ${from}`;
      const first = open.get(key);
      if (first === undefined) {
        open.set(key, { from, to, facet: f });
        return;
      }
      open.delete(key);
      const a = facetNormal(mesh.positions, mesh.facets[first.facet].corners);
      const b = facetNormal(mesh.positions, facet.corners);
      const crease = a[0] * b[0] + a[1] * b[1] + a[2] * b[2] < CREASE_COS;
      edges.push({ from: first.from, to: first.to, one: first.facet, other: f, crease });
    });
  });
  return edges;
}
