/** Ground, grid and horizon: they follow the eye, the grid in whole steps, so that it stays on the ground. */
import { Group, type MeshBasicMaterial, type PerspectiveCamera, Vector3 } from 'three';
import type { LineMaterial } from 'three/examples/jsm/lines/LineMaterial.js';
import { ConvexMesh } from '../render/convex-mesh.ts';
import { DynamicSegments } from '../render/dynamic-segments.ts';
import type { StagePalette } from '../view/palette.ts';
import { between } from '../view/palette.ts';
import { ink, LAYER, layLine, wash } from './layers.ts';

/** Far enough that its rim lies on the horizon at any height flown. */
const GROUND_RADIUS_M = 2e6;
const RIM = 48;
const GRID_LINES = 26;
const GRID_CUTS = 6;
/** Depression of the hair lines under the horizon, px at the default view, and how strong each is. */
const HAIRLINES: readonly (readonly [number, number])[] = [
  [2, 0.8],
  [3.4, 0.66],
  [6, 0.52],
  [10, 0.4],
  [16, 0.28],
];
const HAIR_STEP_RAD = (4 * Math.PI) / 180;
const FULL_TURN = 2 * Math.PI;

/** Spacing of the grid for a span and a height; m. Doubles and more as the aeroplane climbs, so that squares stay visible. */
export function gridSpacing(spanM: number, heightM: number): number {
  const base = spanM > 25 ? 200 : 100;
  const factors = [1, 2, 5, 10, 20, 50, 100];
  const wanted = Math.max(0, heightM) / 3.2;
  return base * (factors.find((factor) => base * factor >= wanted) ?? 100);
}

export class GroundPlane {
  readonly object = new Group();
  spacingM = 100;
  private readonly groundFill: MeshBasicMaterial = wash();
  private readonly ground = new ConvexMesh(1, RIM, this.groundFill);
  private readonly gridLine: LineMaterial = layLine(0.8);
  private readonly grid = new DynamicSegments(2 * (2 * GRID_LINES + 1) * GRID_CUTS, this.gridLine);
  private readonly horizonLine: LineMaterial = layLine(1.5);
  private readonly tickLine: LineMaterial = layLine(1);
  private readonly horizon = new DynamicSegments(90, this.horizonLine);
  private readonly ticks = new DynamicSegments(72, this.tickLine);
  private readonly hairs = HAIRLINES.map(([, strength]) => {
    const line = layLine(0.8);
    return { line, strength, segments: new DynamicSegments(90, line) };
  });
  private readonly heading = new Vector3();

  constructor(private readonly spanM: number) {
    for (let i = 0; i < RIM; i++) {
      const angle = (i / RIM) * FULL_TURN;
      this.ground.setCorner(0, i, GROUND_RADIUS_M * Math.cos(angle), 0, -GROUND_RADIUS_M * Math.sin(angle));
    }
    this.ground.object.renderOrder = LAYER.ground;
    this.grid.object.renderOrder = LAYER.grid;
    for (const lines of [this.horizon, this.ticks]) lines.object.renderOrder = LAYER.horizon;
    this.object.add(this.ground.object, this.grid.object, this.horizon.object, this.ticks.object);
    for (const hair of this.hairs) {
      hair.segments.object.renderOrder = LAYER.grid;
      this.object.add(hair.segments.object);
    }
    ring(this.horizon, 0);
  }

  /** Moves everything under the eye. `alignRad` turns the grid (runway heading, or 0). */
  update(place: Vector3, camera: PerspectiveCamera, alignRad: number, viewHeightPx: number): void {
    const eye = camera.position;
    this.ground.object.position.set(eye.x, 0, eye.z);
    for (const lines of [this.horizon, this.ticks]) lines.object.position.copy(eye);
    const pxPerRad = viewHeightPx / 2 / Math.tan((camera.fov * Math.PI) / 360);
    this.drawTicks(pxPerRad);
    this.hairs.forEach((hair, i) => {
      hair.segments.object.position.copy(eye);
      ring(hair.segments, -HAIRLINES[i][0] / pxPerRad);
    });
    this.heading.set(Math.sin(alignRad), 0, -Math.cos(alignRad));
    this.drawGrid(place);
  }

  setColours(palette: StagePalette): void {
    ink(this.groundFill, palette.rgb.ground);
    ink(this.gridLine, palette.rgb.grid);
    ink(this.horizonLine, palette.rgb.ink);
    ink(this.tickLine, palette.rgb.ink);
    for (const hair of this.hairs) ink(hair.line, between(palette.rgb.ground, palette.rgb.grid, hair.strength));
  }

  dispose(): void {
    this.ground.dispose();
    for (const lines of [this.grid, this.horizon, this.ticks, ...this.hairs.map((hair) => hair.segments)])
      lines.dispose();
    for (const material of [this.groundFill, this.gridLine, this.horizonLine, this.tickLine]) material.dispose();
    for (const hair of this.hairs) hair.line.dispose();
  }

  /** Ticks of 5° (4 px) and 10° (8 px) above the horizon, on true headings. */
  private drawTicks(pxPerRad: number): void {
    this.ticks.clear();
    for (let k = 0; k < 72; k++) {
      const angle = (k * FULL_TURN) / 72;
      const x = Math.sin(angle) * RING_M;
      const z = -Math.cos(angle) * RING_M;
      this.ticks.add(x, 0, z, x, ((k % 2 === 0 ? 8 : 4) / pxPerRad) * RING_M, z);
    }
    this.ticks.commit();
  }

  /** Lines through the whole steps nearest the aeroplane, cut into pieces so that none crosses the whole scene. */
  private drawGrid(place: Vector3): void {
    this.spacingM = gridSpacing(this.spanM, place.y);
    const step = this.spacingM;
    const { x: ax, z: az } = this.heading;
    // along the heading and to its right
    const along = Math.round((place.x * ax + place.z * az) / step) * step;
    const across = Math.round((-place.x * az + place.z * ax) / step) * step;
    const reach = GRID_LINES * step;
    const piece = (2 * reach) / GRID_CUTS;
    this.grid.clear();
    for (let i = -GRID_LINES; i <= GRID_LINES; i++) {
      for (let c = 0; c < GRID_CUTS; c++) {
        const from = -reach + c * piece;
        this.gridSegment(along + from, across + i * step, along + from + piece, across + i * step);
        this.gridSegment(along + i * step, across + from, along + i * step, across + from + piece);
      }
    }
    this.grid.commit();
  }

  private gridSegment(along0: number, across0: number, along1: number, across1: number): void {
    const { x: ax, z: az } = this.heading;
    this.grid.add(
      along0 * ax - across0 * az,
      0,
      along0 * az + across0 * ax,
      along1 * ax - across1 * az,
      0,
      along1 * az + across1 * ax,
    );
  }
}

/** Distance at which horizon marks are placed round the eye; they have no depth, so any will do. */
const RING_M = 1000;

/** A ring of segments at an elevation (rad, small) round the origin. */
function ring(lines: DynamicSegments, elevation: number): void {
  lines.clear();
  const y = elevation * RING_M;
  for (let angle = 0; angle < FULL_TURN - 1e-9; angle += HAIR_STEP_RAD) {
    const next = angle + HAIR_STEP_RAD;
    lines.add(
      Math.sin(angle) * RING_M,
      y,
      -Math.cos(angle) * RING_M,
      Math.sin(next) * RING_M,
      y,
      -Math.cos(next) * RING_M,
    );
  }
  lines.commit();
}
