/** One pass of the CPU renderer over a scene: collects, orders, transforms, cuts and hands to the rasterisers. No allocation per frame. */
import {
  BackSide,
  type BufferGeometry,
  type Camera,
  type Color,
  DoubleSide,
  type InterleavedBufferAttribute,
  Matrix4,
  Mesh,
  MeshBasicMaterial,
  type Object3D,
} from 'three';
import { LineMaterial } from 'three/examples/jsm/lines/LineMaterial.js';
import { LineSegments2 } from 'three/examples/jsm/lines/LineSegments2.js';
import { clipPolygonNear, clipSegment, type ScreenSegment } from './clip.ts';
import { outlinesOf } from './convex-mesh.ts';
import { hatchTile, PatternMaterial, stippleTile, TILE_SAMPLES, TILE_SIDE } from './pattern-material.ts';
import { type LineStroke, strokeSegment } from './raster-line.ts';
import { PolygonRaster } from './raster-polygon.ts';
import { fillTriangle, type PatternFill, type TriangleFill } from './raster-triangle.ts';
import { packColour, type Surface } from './surface.ts';

/** Nearest distance drawn, as a share of the camera's own near plane: exactly that plane. */
const MAX_CORNERS = 64;

export class SoftPass {
  calls = 0;
  triangles = 0;
  lines = 0;
  private readonly items: Object3D[] = [];
  private itemCount = 0;
  private readonly view = new Matrix4();
  private readonly model = new Matrix4();
  private readonly clip = new Float64Array(16);
  private readonly raw = new Float64Array(3 * MAX_CORNERS);
  private readonly cut = new Float64Array(3 * (MAX_CORNERS + 1));
  private readonly flat = new Float64Array(2 * (MAX_CORNERS + 1));
  private readonly polygons = new PolygonRaster();
  private readonly segment: ScreenSegment = { x0: 0, y0: 0, q0: 0, x1: 0, y1: 0, q1: 0 };
  private readonly stroke: LineStroke = { width: 1, colour: 0, opacity: 256, depthTest: true, depthOffset: false };
  private readonly fill: TriangleFill = {
    colour: 0,
    opacity: 256,
    colourWrite: true,
    depthTest: true,
    depthWrite: true,
    pattern: null,
  };
  private readonly stipple = stippleTile();
  private readonly hatch = hatchTile();
  private readonly pattern: PatternFill = {
    tile: this.stipple,
    side: TILE_SIDE,
    lined: false,
    ux: 0,
    uy: 0,
    u0: 0,
    vx: 0,
    vy: 0,
    v0: 0,
  };
  private near = 0.1;
  private halfWidth = 0;
  private halfHeight = 0;
  private ratio = 1;

  constructor(private readonly surface: Surface) {}

  resize(): void {
    this.polygons.resize(this.surface.height);
  }

  draw(scene: Object3D, camera: Camera, ratio: number): void {
    this.calls = 0;
    this.triangles = 0;
    this.lines = 0;
    this.itemCount = 0;
    this.ratio = ratio;
    this.halfWidth = this.surface.width / 2;
    this.halfHeight = this.surface.height / 2;
    this.near = (camera as { near?: number }).near ?? 0.1; // perspective and orthographic cameras have it
    this.view.multiplyMatrices(camera.projectionMatrix, camera.matrixWorldInverse);
    this.collect(scene);
    this.order();
    for (let i = 0; i < this.itemCount; i++) this.item(this.items[i], camera);
  }

  private collect(object: Object3D): void {
    if (!object.visible) return;
    if (object instanceof Mesh) this.items[this.itemCount++] = object;
    else if ('isLine' in object || 'isPoints' in object || 'isSprite' in object) {
      throw new Error(`The CPU renderer does not draw ${object.type}; use LineSegments2 or a mesh.`);
    }
    const children = object.children;
    for (let i = 0; i < children.length; i++) this.collect(children[i]);
  }

  /** Insertion sort by renderOrder: stable, nothing allocated, nearly sorted from frame to frame. */
  private order(): void {
    const items = this.items;
    for (let i = 1; i < this.itemCount; i++) {
      const item = items[i];
      let j = i - 1;
      while (j >= 0 && items[j].renderOrder > item.renderOrder) {
        items[j + 1] = items[j];
        j--;
      }
      items[j + 1] = item;
    }
  }

  private item(object: Object3D, camera: Camera): void {
    this.calls++;
    this.model.multiplyMatrices(this.view, object.matrixWorld);
    this.clip.set(this.model.elements);
    if (object instanceof LineSegments2) {
      this.segments(object);
      return;
    }
    if (!(object instanceof Mesh)) return;
    const material: unknown = object.material;
    const geometry = object.geometry as BufferGeometry; // every mesh of the stage has one
    if (material instanceof PatternMaterial) {
      material.prepare(object, camera, this.surface.width, this.surface.height, this.ratio);
      this.setPattern(material);
      this.faces(geometry, material.side, null);
    } else if (material instanceof MeshBasicMaterial) {
      const fill = this.fill;
      fill.pattern = null;
      fill.opacity = material.transparent ? Math.round(material.opacity * 256) : 256;
      fill.colourWrite = material.colorWrite;
      fill.depthTest = material.depthTest;
      fill.depthWrite = material.depthWrite;
      fill.colour = pack(material.color);
      const outlined = outlinesOf(geometry);
      if (outlined !== null && !material.depthTest) this.outlines(geometry, outlined.outlines, outlined.count);
      else this.faces(geometry, material.side, material.vertexColors ? colourArray(geometry) : null);
    } else {
      throw new Error(`The CPU renderer does not draw the material of ${object.name || object.type}.`);
    }
  }

  private setPattern(material: PatternMaterial): void {
    const { fill, pattern } = this;
    fill.pattern = pattern;
    fill.colour = pack(material.colour);
    fill.opacity = 256;
    fill.colourWrite = true;
    fill.depthTest = material.depthTest;
    fill.depthWrite = false;
    const scale = TILE_SAMPLES / this.ratio;
    const { x, y } = material.originPx;
    pattern.lined = material.kind === 'hatch';
    pattern.tile = pattern.lined ? this.hatch : this.stipple;
    const c = Math.cos(material.angle) * scale;
    const s = Math.sin(material.angle) * scale;
    // turned back by the angle: u = x cos + y sin, v = y cos − x sin
    const diagonal = pattern.lined ? Math.SQRT1_2 : 0;
    pattern.ux = pattern.lined ? (c - s) * diagonal : c;
    pattern.uy = pattern.lined ? (c + s) * diagonal : s;
    pattern.vx = -s;
    pattern.vy = c;
    pattern.u0 = (0.5 - x) * pattern.ux + (0.5 - y) * pattern.uy;
    pattern.v0 = (0.5 - x) * pattern.vx + (0.5 - y) * pattern.vy;
  }

  /** Writes vertex `index` as homogeneous x, y, w into place `to` of the raw corners. */
  private transform(positions: ArrayLike<number>, index: number, to: number): void {
    const m = this.clip;
    const x = positions[3 * index];
    const y = positions[3 * index + 1];
    const z = positions[3 * index + 2];
    this.raw[3 * to] = m[0] * x + m[4] * y + m[8] * z + m[12];
    this.raw[3 * to + 1] = m[1] * x + m[5] * y + m[9] * z + m[13];
    this.raw[3 * to + 2] = m[3] * x + m[7] * y + m[11] * z + m[15];
  }

  private faces(geometry: BufferGeometry, side: number, colours: ArrayLike<number> | null): void {
    const positions = geometry.attributes['position'].array;
    const index = geometry.index?.array ?? null;
    const all = index === null ? positions.length / 3 : index.length;
    const start = geometry.drawRange.start;
    const end = Math.min(all, start + geometry.drawRange.count);
    const { raw, cut, near, halfWidth, halfHeight, fill } = this;
    for (let t = start; t + 2 < end; t += 3) {
      const first = index === null ? t : index[t];
      this.transform(positions, first, 0);
      this.transform(positions, index === null ? t + 1 : index[t + 1], 1);
      this.transform(positions, index === null ? t + 2 : index[t + 2], 2);
      if (colours !== null)
        fill.colour = packColour(colours[3 * first], colours[3 * first + 1], colours[3 * first + 2]);
      let points = raw;
      let count = 3;
      if (raw[2] < near || raw[5] < near || raw[8] < near) {
        count = clipPolygonNear(raw, 3, near, cut);
        points = cut;
        if (count < 3) continue;
      }
      const q0 = 1 / points[2];
      const x0 = halfWidth + halfWidth * points[0] * q0;
      const y0 = halfHeight - halfHeight * points[1] * q0;
      for (let i = 1; i + 1 < count; i++) {
        const q1 = 1 / points[3 * i + 2];
        const x1 = halfWidth + halfWidth * points[3 * i] * q1;
        const y1 = halfHeight - halfHeight * points[3 * i + 1] * q1;
        const q2 = 1 / points[3 * i + 5];
        const x2 = halfWidth + halfWidth * points[3 * i + 3] * q2;
        const y2 = halfHeight - halfHeight * points[3 * i + 4] * q2;
        // y points down on the screen, so a front face turns clockwise there
        const turn = (x1 - x0) * (y2 - y0) - (x2 - x0) * (y1 - y0);
        if (side !== DoubleSide && (side === BackSide ? turn <= 0 : turn >= 0)) continue;
        this.triangles++;
        fillTriangle(this.surface, x0, y0, q0, x1, y1, q1, x2, y2, q2, fill);
      }
    }
  }

  private outlines(geometry: BufferGeometry, outlines: Int32Array, count: number): void {
    const positions = geometry.attributes['position'].array;
    const { flat, halfWidth, halfHeight } = this;
    for (let p = 0; p < count; p++) {
      const first = outlines[2 * p];
      const corners = Math.min(MAX_CORNERS, outlines[2 * p + 1]);
      for (let i = 0; i < corners; i++) this.transform(positions, first + i, i);
      const left = clipPolygonNear(this.raw, corners, this.near, this.cut);
      if (left < 3) continue;
      for (let i = 0; i < left; i++) {
        const q = 1 / this.cut[3 * i + 2];
        flat[2 * i] = halfWidth + halfWidth * this.cut[3 * i] * q;
        flat[2 * i + 1] = halfHeight - halfHeight * this.cut[3 * i + 1] * q;
      }
      this.triangles += left - 2;
      this.polygons.fill(this.surface, flat, left, this.fill.colour, this.fill.opacity);
    }
  }

  private segments(object: LineSegments2): void {
    const material: unknown = object.material;
    if (!(material instanceof LineMaterial))
      throw new Error('The CPU renderer draws LineSegments2 with LineMaterial only.');
    const start = object.geometry.attributes['instanceStart'] as InterleavedBufferAttribute; // always interleaved there
    const array = start.data.array;
    const count = Math.min(object.geometry.instanceCount, array.length / 6);
    const { stroke, segment, raw, near, halfWidth, halfHeight } = this;
    stroke.width = material.linewidth * this.ratio;
    stroke.opacity = material.transparent ? Math.round(material.opacity * 256) : 256;
    stroke.colour = pack(material.color);
    stroke.depthTest = material.depthTest;
    stroke.depthOffset = material.polygonOffset;
    const { width, height } = this.surface;
    for (let i = 0; i < count; i++) {
      this.transform(array, 2 * i, 0);
      this.transform(array, 2 * i + 1, 1);
      const w0 = raw[2];
      const w1 = raw[5];
      if (w0 < near && w1 < near) continue;
      if (w0 < near) this.pull(0, 1);
      else if (w1 < near) this.pull(1, 0);
      segment.q0 = 1 / raw[2];
      segment.x0 = halfWidth + halfWidth * raw[0] * segment.q0;
      segment.y0 = halfHeight - halfHeight * raw[1] * segment.q0;
      segment.q1 = 1 / raw[5];
      segment.x1 = halfWidth + halfWidth * raw[3] * segment.q1;
      segment.y1 = halfHeight - halfHeight * raw[4] * segment.q1;
      if (!clipSegment(segment, width, height, stroke.width + 1)) continue;
      this.lines++;
      strokeSegment(this.surface, segment, stroke);
    }
  }

  /** Moves end `behind` of the raw segment on to the near plane. */
  private pull(behind: number, other: number): void {
    const { raw, near } = this;
    const a = 3 * behind;
    const b = 3 * other;
    const t = (near - raw[a + 2]) / (raw[b + 2] - raw[a + 2]);
    raw[a] += (raw[b] - raw[a]) * t;
    raw[a + 1] += (raw[b + 1] - raw[a + 1]) * t;
    raw[a + 2] = near;
  }
}

const pack = (colour: Color): number => packColour(colour.r, colour.g, colour.b);

function colourArray(geometry: BufferGeometry): ArrayLike<number> {
  return geometry.attributes['color'].array;
}
