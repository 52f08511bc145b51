/** The way flown: an ink line through the air, stripes of half a second dropped to the ground, a dashed line where they stand. */
import { Group, type MeshBasicMaterial } from 'three';
import type { LineMaterial } from 'three/examples/jsm/lines/LineMaterial.js';
import { ConvexMesh } from '../render/convex-mesh.ts';
import { DynamicSegments } from '../render/dynamic-segments.ts';
import type { StagePalette } from '../view/palette.ts';
import { ink, LAYER, layLine, wash } from './layers.ts';
import { slotBefore, SLOTS_PER_SECOND, type TrackHistory } from './track-history.ts';

/** How far back the ribbon reaches. Ours. */
export const RIBBON_S = 20;
/** Slots in a stripe: half a second. */
const STRIPE_SLOTS = SLOTS_PER_SECOND / 2;
const QUADS = RIBBON_S * SLOTS_PER_SECOND + 1;

export class TrackRibbon {
  readonly object = new Group();
  private readonly darkFill: MeshBasicMaterial = wash(0.1);
  private readonly lightFill: MeshBasicMaterial = wash(0.05);
  private readonly topInk: LineMaterial = layLine(1.75);
  private readonly footInk: LineMaterial = layLine(1);
  private readonly dark = new ConvexMesh(QUADS, 4, this.darkFill);
  private readonly light = new ConvexMesh(QUADS, 4, this.lightFill);
  private readonly top = new DynamicSegments(QUADS, this.topInk);
  private readonly foot = new DynamicSegments(QUADS, this.footInk);

  constructor() {
    this.dark.object.renderOrder = LAYER.curtain;
    this.light.object.renderOrder = LAYER.curtain;
    this.top.object.renderOrder = LAYER.trackLines;
    this.foot.object.renderOrder = LAYER.trackLines;
    this.object.add(this.dark.object, this.light.object, this.top.object, this.foot.object);
  }

  /** Lays the ribbon up to a tick and the present place (scene coordinates). */
  update(history: TrackHistory, tick: number, x: number, y: number, z: number): void {
    this.top.clear();
    this.foot.clear();
    let darkCount = 0;
    let lightCount = 0;
    const last = slotBefore(tick);
    const { places } = history;
    for (let slot = last; slot > last - QUADS && slot >= 0; slot--) {
      if (!history.has(slot)) break;
      const newest = slot === last;
      if (!newest && !history.has(slot + 1)) break;
      const a = 3 * slot;
      const x1 = newest ? x : places[a + 3];
      const y1 = newest ? y : places[a + 4];
      const z1 = newest ? z : places[a + 5];
      this.top.add(places[a], places[a + 1], places[a + 2], x1, y1, z1);
      if (slot % 2 === 0) this.foot.add(places[a], 0, places[a + 2], x1, 0, z1);
      const isDark = Math.floor(slot / STRIPE_SLOTS) % 2 === 0;
      const mesh = isDark ? this.dark : this.light;
      const index = isDark ? darkCount++ : lightCount++;
      mesh.setCorner(index, 0, places[a], places[a + 1], places[a + 2]);
      mesh.setCorner(index, 1, x1, y1, z1);
      mesh.setCorner(index, 2, x1, 0, z1);
      mesh.setCorner(index, 3, places[a], 0, places[a + 2]);
    }
    this.dark.show(darkCount);
    this.light.show(lightCount);
    this.dark.commit();
    this.light.commit();
    this.top.commit();
    this.foot.commit();
  }

  setColours(palette: StagePalette): void {
    for (const material of [this.darkFill, this.lightFill, this.topInk, this.footInk]) ink(material, palette.rgb.ink);
  }

  dispose(): void {
    for (const part of [this.dark, this.light, this.top, this.foot]) part.dispose();
    for (const material of [this.darkFill, this.lightFill, this.topInk, this.footInk]) material.dispose();
  }
}
