/**
 * The runway of a scenario: surface, outline, threshold bars at both ends, centre line, touchdown blocks, extended centre line.
 * Heading, width and threshold come from the scenario; length and markings are the drawing's (ours, plain).
 */
import { Group, type MeshBasicMaterial } from 'three';
import type { LineMaterial } from 'three/examples/jsm/lines/LineMaterial.js';
import type { RunwaySetup } from '#shared/model/plant-types.ts';
import { ConvexMesh } from '../render/convex-mesh.ts';
import { DynamicSegments } from '../render/dynamic-segments.ts';
import type { StagePalette } from '../view/palette.ts';
import { ink, LAYER, layLine, wash } from './layers.ts';

const DASH_M = 30;
const DASH_GAP_M = 20;
const BAR_LENGTH_M = 30;
const BAR_GAP_M = 6;
const EXTENDED_M = 2400;
const EXTENDED_DASH_M = 60;
const SURFACE_CUTS = 12;

/** Drawn length of a runway: longer where the aeroplane is larger; m. */
export function drawnRunwayLength(spanM: number): number {
  return spanM > 45 ? 3600 : spanM > 25 ? 3000 : spanM > 15 ? 2000 : 1600;
}

export class Runway {
  readonly object = new Group();
  private readonly surfaceFill: MeshBasicMaterial = wash(0.55);
  private readonly markingFill: MeshBasicMaterial = wash();
  private readonly outlineInk: LineMaterial = layLine(1);
  private readonly surface = new ConvexMesh(SURFACE_CUTS, 4, this.surfaceFill);
  private readonly markings: ConvexMesh;
  private readonly outline = new DynamicSegments(2 * SURFACE_CUTS + 2, this.outlineInk);
  private readonly extended: DynamicSegments;
  private markingCount = 0;
  private readonly ax: number;
  private readonly az: number;

  constructor(
    private readonly setup: RunwaySetup,
    spanM: number,
  ) {
    this.ax = Math.sin(setup.headingRad);
    this.az = -Math.cos(setup.headingRad);
    const length = drawnRunwayLength(spanM);
    const start = setup.thresholdM;
    const bars = Math.max(2, Math.floor((setup.widthM * 0.8) / (2 * barPitch(setup.widthM))));
    const dashes = Math.ceil(length / (DASH_M + DASH_GAP_M));
    this.markings = new ConvexMesh(4 * bars + dashes + 8, 4, this.markingFill);
    this.extended = new DynamicSegments(Math.ceil((2 * EXTENDED_M) / EXTENDED_DASH_M) + 4, this.outlineInk);
    this.object.add(this.surface.object, this.outline.object, this.markings.object, this.extended.object);
    this.surface.object.renderOrder = LAYER.runway;
    this.outline.object.renderOrder = LAYER.runwayOutline;
    this.extended.object.renderOrder = LAYER.runwayOutline;
    this.markings.object.renderOrder = LAYER.markings;
    this.lay(start, length, bars);
  }

  setColours(palette: StagePalette): void {
    ink(this.surfaceFill, palette.rgb.tone3);
    ink(this.markingFill, palette.rgb.sky);
    ink(this.outlineInk, palette.rgb.ink3);
  }

  dispose(): void {
    for (const part of [this.surface, this.markings, this.outline, this.extended]) part.dispose();
    for (const material of [this.surfaceFill, this.markingFill, this.outlineInk]) material.dispose();
  }

  private lay(start: number, length: number, bars: number): void {
    const half = this.setup.widthM / 2;
    const end = start + length;
    const cut = length / SURFACE_CUTS;
    for (let i = 0; i < SURFACE_CUTS; i++) {
      this.rectangle(this.surface, i, start + i * cut, start + (i + 1) * cut, -half, half);
      for (const side of [-half, half]) this.line(this.outline, start + i * cut, side, start + (i + 1) * cut, side);
    }
    for (const at of [start, end]) this.line(this.outline, at, -half, at, half);
    this.surface.commit();
    this.outline.commit();

    const pitch = barPitch(this.setup.widthM);
    for (const [from, to] of [
      [start + BAR_GAP_M, start + BAR_GAP_M + BAR_LENGTH_M],
      [end - BAR_GAP_M - BAR_LENGTH_M, end - BAR_GAP_M],
    ]) {
      for (let i = 0; i < bars; i++) {
        const inner = pitch * (i + 0.35);
        for (const side of [-1, 1]) this.mark(from, to, side * inner, side * (inner + pitch * 0.6));
      }
    }
    for (let at = start + 70; at + DASH_M < end - 70; at += DASH_M + DASH_GAP_M)
      this.mark(at, at + DASH_M, -0.45, 0.45);
    for (const at of [start + 300, end - 345]) {
      for (const side of [-1, 1]) this.mark(at, at + 45, side * half * 0.32, side * half * 0.5);
    }
    this.markings.show(this.markingCount);
    this.markings.commit();

    for (let at = EXTENDED_DASH_M; at < EXTENDED_M; at += EXTENDED_DASH_M * 2) {
      this.line(this.extended, end + at, 0, end + at + EXTENDED_DASH_M, 0);
      this.line(this.extended, start - at, 0, start - at - EXTENDED_DASH_M, 0);
    }
    this.extended.commit();
  }

  private mark(from: number, to: number, left: number, right: number): void {
    if (this.markingCount < this.markings.capacity)
      this.rectangle(this.markings, this.markingCount++, from, to, left, right);
  }

  /** Along the runway and to its right, on the ground. */
  private rectangle(mesh: ConvexMesh, index: number, from: number, to: number, left: number, right: number): void {
    const corner = (i: number, along: number, across: number): void =>
      mesh.setCorner(index, i, along * this.ax - across * this.az, 0, along * this.az + across * this.ax);
    corner(0, from, left);
    corner(1, to, left);
    corner(2, to, right);
    corner(3, from, right);
  }

  private line(lines: DynamicSegments, along0: number, across0: number, along1: number, across1: number): void {
    const { ax, az } = this;
    lines.add(
      along0 * ax - across0 * az,
      0,
      along0 * az + across0 * ax,
      along1 * ax - across1 * az,
      0,
      along1 * az + across1 * ax,
    );
  }
}

/** Width of a threshold bar and its gap. */
const barPitch = (widthM: number): number => Math.min(3.6, widthM / 9);
