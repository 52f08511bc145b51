/** Height made visible: the aeroplane's shadow straight beneath it and a dotted line down to the shadow. */
import { Group, type MeshBasicMaterial } from 'three';
import type { LineMaterial } from 'three/examples/jsm/lines/LineMaterial.js';
import { ConvexMesh } from '../render/convex-mesh.ts';
import { DynamicSegments } from '../render/dynamic-segments.ts';
import type { AirframeShape } from '../shape/shape-types.ts';
import type { StagePalette } from '../view/palette.ts';
import { ink, LAYER, layLine, wash } from './layers.ts';

const DOTS = 160;

export class HeightCue {
  readonly object = new Group();
  private readonly shadowFill: MeshBasicMaterial = wash(0.14);
  private readonly dotInk: LineMaterial = layLine(1.2);
  private readonly shadow: ConvexMesh;
  private readonly dots = new DynamicSegments(DOTS, this.dotInk);
  private readonly dotPitchM: number;

  constructor(shape: AirframeShape) {
    this.dotPitchM = shape.spanM * 0.022;
    this.shadow = new ConvexMesh(6, 4, this.shadowFill);
    this.shadow.object.renderOrder = LAYER.shadow;
    this.dots.object.renderOrder = LAYER.dropLine;
    this.object.add(this.shadow.object, this.dots.object);
    this.cut(shape);
  }

  /** Drops from the mass centre (scene coordinates) along the heading; the pattern of dots hangs from the aeroplane. */
  update(x: number, y: number, z: number, headingRad: number): void {
    this.shadow.object.position.set(x, 0, z);
    this.shadow.object.rotation.y = -headingRad;
    this.dots.clear();
    // at great heights the dots stretch rather than run out
    const pitch = Math.max(this.dotPitchM, y / (DOTS - 1));
    for (let drop = 0; drop < y; drop += pitch) {
      this.dots.add(x, y - drop, z, x, Math.max(0, y - drop - pitch * 0.3), z);
    }
    this.dots.commit();
  }

  setColours(palette: StagePalette): void {
    ink(this.shadowFill, palette.rgb.ink);
    ink(this.dotInk, palette.rgb.ink);
  }

  dispose(): void {
    this.shadow.dispose();
    this.dots.dispose();
    this.shadowFill.dispose();
    this.dotInk.dispose();
  }

  /** Plan form in pieces that meet without overlapping: wing halves up to the fuselage, fuselage in three, tail halves. */
  private cut(shape: AirframeShape): void {
    const { wing, tailplane, noseX, tailX, bodyRadius: r } = shape;
    const piece = (index: number, corners: readonly (readonly [number, number])[]): void =>
      corners.forEach(([forward, right], i) => this.shadow.setCorner(index, i, right, 0, -forward));
    [-1, 1].forEach((side, i) => {
      piece(i, [
        [wing.root.x, side * r * 0.8],
        [wing.tip.x, side * wing.tip.y],
        [wing.tip.x - wing.tip.chord, side * wing.tip.y],
        [wing.root.x - wing.root.chord, side * r * 0.8],
      ]);
      piece(2 + i, [
        [tailplane.root.x, side * r * 0.3],
        [tailplane.tip.x, side * tailplane.tip.y],
        [tailplane.tip.x - tailplane.tip.chord, side * tailplane.tip.y],
        [tailplane.root.x - tailplane.root.chord, side * r * 0.3],
      ]);
    });
    const middle = noseX + (tailX - noseX) * 0.55;
    piece(4, [
      [noseX, -r * 0.4],
      [noseX, r * 0.4],
      [middle, r * 0.8],
      [middle, -r * 0.8],
    ]);
    piece(5, [
      [middle, -r * 0.8],
      [middle, r * 0.8],
      [tailX, r * 0.3],
      [tailX, -r * 0.3],
    ]);
    this.shadow.commit();
  }
}
