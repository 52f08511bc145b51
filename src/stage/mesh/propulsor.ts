/**
 * The mark of one engine: stippled disc where it gives thrust, hatched disc with its blades still where it failed,
 * blades edge-on when feathered, both textures in shares when it lost part of its thrust. Jets carry the same mark as a plate at the exhaust.
 */
import { BufferAttribute, BufferGeometry, Group, Mesh } from 'three';
import type { LineMaterial } from 'three/examples/jsm/lines/LineMaterial.js';
import { DynamicSegments } from '../render/dynamic-segments.ts';
import { PatternMaterial } from '../render/pattern-material.ts';
import type { EngineShape } from '../shape/shape-types.ts';
import type { StagePalette } from '../view/palette.ts';

const SEGMENTS = 40;
const BLADES = 3;
/** Resting blades: the first points a little right of up, seen from behind; rad clockwise. Ours. */
const REST_ANGLE = 0.28;
/** A live disc's stipple turns this far per second of run time; slow enough to see. Ours. */
export const SHOWN_TURN_RAD_PER_S = 0.7;

export interface PropulsorInks {
  liveRim: LineMaterial;
  deadRim: LineMaterial;
  blade: LineMaterial;
  edgeOnBlade: LineMaterial;
}

/** What the mark shows. */
export interface PropulsorState {
  /** 0 healthy, 1 failed windmilling, 2 feathering or feathered, 3 partial. */
  engineState: number;
  /** Thrust over what the healthy engine would give, 0 … 1. */
  share: number;
  timeS: number;
}

export class Propulsor {
  readonly object = new Group();
  private readonly stipple = new PatternMaterial('stipple');
  private readonly hatch = new PatternMaterial('hatch');
  private readonly live: Mesh;
  private readonly dead: Mesh;
  private readonly liveRim: DynamicSegments;
  private readonly deadRim: DynamicSegments;
  private readonly blades: DynamicSegments;
  private readonly edgeOn: DynamicSegments;
  private shownShare = Number.NaN;

  constructor(
    private readonly shape: EngineShape,
    inks: PropulsorInks,
  ) {
    this.object.position.set(shape.y, -shape.z, -shape.x);
    this.live = disc(shape.discRadius, this.stipple);
    this.dead = disc(shape.discRadius, this.hatch);
    this.liveRim = rim(inks.liveRim);
    this.deadRim = rim(inks.deadRim);
    this.blades = new DynamicSegments(BLADES, inks.blade);
    this.edgeOn = new DynamicSegments(BLADES, inks.edgeOnBlade);
    for (const lines of [this.liveRim, this.deadRim, this.blades, this.edgeOn]) lines.object.renderOrder = 31;
    this.addBlades(this.blades, 1);
    this.addBlades(this.edgeOn, 0.94);
    this.object.add(this.live, this.dead);
    this.object.add(this.liveRim.object, this.deadRim.object, this.blades.object, this.edgeOn.object);
  }

  update(state: PropulsorState): void {
    const failed = state.engineState === 1 || state.engineState === 2;
    const share = failed ? 0 : state.engineState === 3 ? Math.min(1, Math.max(0, state.share)) : 1;
    if (share !== this.shownShare) this.split(share);
    this.live.visible = share > 0;
    this.dead.visible = share < 1;
    this.liveRim.object.visible = share > 0;
    this.deadRim.object.visible = share < 1;
    this.blades.object.visible = state.engineState === 1;
    this.edgeOn.object.visible = state.engineState === 2;
    // modulo a turn by hand: the angle depends on run time alone
    this.stipple.angle = ((SHOWN_TURN_RAD_PER_S * state.timeS) % (2 * Math.PI)) * this.shape.turn;
  }

  setColours(palette: StagePalette): void {
    this.stipple.colour.setRGB(palette.rgb.live.r, palette.rgb.live.g, palette.rgb.live.b);
    this.hatch.colour.setRGB(palette.rgb.dead.r, palette.rgb.dead.g, palette.rgb.dead.b);
  }

  dispose(): void {
    this.live.geometry.dispose();
    this.dead.geometry.dispose();
    this.stipple.dispose();
    this.hatch.dispose();
    for (const lines of [this.liveRim, this.deadRim, this.blades, this.edgeOn]) lines.dispose();
  }

  /** Live sectors run clockwise from the top, lost ones follow. */
  private split(share: number): void {
    this.shownShare = share;
    const whole = Math.round(share * SEGMENTS);
    this.live.geometry.setDrawRange(0, 3 * whole);
    this.dead.geometry.setDrawRange(3 * whole, 3 * (SEGMENTS - whole));
    for (const [lines, from, to] of [
      [this.liveRim, 0, whole],
      [this.deadRim, whole, SEGMENTS],
    ] as const) {
      lines.clear();
      for (let k = from; k < to; k++) {
        const a = around(k, this.shape.discRadius);
        const b = around(k + 1, this.shape.discRadius);
        lines.add(a[0], a[1], 0, b[0], b[1], 0);
      }
      lines.commit();
    }
  }

  private addBlades(lines: DynamicSegments, reach: number): void {
    const r = this.shape.discRadius * reach;
    if (this.shape.kind === 'jet') {
      lines.add(-0.7 * r, -0.7 * r, 0, 0.7 * r, 0.7 * r, 0);
      lines.add(-0.7 * r, 0.7 * r, 0, 0.7 * r, -0.7 * r, 0);
    } else {
      for (let k = 0; k < BLADES; k++) {
        const angle = REST_ANGLE + (k * 2 * Math.PI) / BLADES;
        lines.add(0, 0, 0, r * Math.sin(angle), r * Math.cos(angle), 0);
      }
    }
    lines.commit();
  }
}

/** Point k of the rim: clockwise from the top, seen from behind. */
function around(k: number, radius: number): [number, number] {
  const angle = (k / SEGMENTS) * 2 * Math.PI;
  return [radius * Math.sin(angle), radius * Math.cos(angle)];
}

function rim(material: LineMaterial): DynamicSegments {
  return new DynamicSegments(SEGMENTS, material);
}

function disc(radius: number, material: PatternMaterial): Mesh {
  const positions = new Float32Array(SEGMENTS * 9);
  for (let k = 0; k < SEGMENTS; k++) {
    const a = around(k, radius);
    const b = around(k + 1, radius);
    positions.set([0, 0, 0, b[0], b[1], 0, a[0], a[1], 0], 9 * k);
  }
  const geometry = new BufferGeometry();
  geometry.setAttribute('position', new BufferAttribute(positions, 3));
  const mesh = new Mesh(geometry, material);
  mesh.renderOrder = 30;
  mesh.frustumCulled = false;
  mesh.onBeforeRender = (renderer, _scene, camera) => {
    const { width, height } = renderer.domElement;
    material.prepare(mesh, camera, width, height, renderer.getPixelRatio());
  };
  return mesh;
}
