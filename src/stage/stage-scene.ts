/** The scene graph of the flying stage: one group, built per airframe and runway, posed per observation. */
import { Group, type Object3D, Vector3 } from 'three';
import type { Observation, RunwaySetup } from '#shared/model/plant-types.ts';
import { GroundPlane } from './ground/ground-plane.ts';
import { HeightCue } from './ground/height-cue.ts';
import { Runway } from './ground/runway.ts';
import { TrackHistory } from './ground/track-history.ts';
import { TrackRibbon } from './ground/track-ribbon.ts';
import { Aeroplane } from './mesh/aeroplane.ts';
import { shapeAirframe } from './shape/airframe-shape.ts';
import type { AirframeShape, ShapeSource } from './shape/shape-types.ts';
import type { CameraName } from './stage-types.ts';
import type { StagePalette } from './view/palette.ts';
import { lightInto } from './view/light.ts';
import { ViewRig } from './view/view-rig.ts';

export interface FramePlan {
  camera: CameraName;
  ribbon: boolean;
  /** Size of the picture; CSS px. */
  width: number;
  height: number;
}

export class StageScene {
  readonly root = new Group();
  readonly shape: AirframeShape;
  readonly rig: ViewRig;
  readonly history = new TrackHistory();
  readonly ground: GroundPlane;
  private readonly runway: Runway | null;
  private readonly ribbon = new TrackRibbon();
  private readonly cue: HeightCue;
  private readonly aeroplane: Aeroplane;
  private ghost: Aeroplane | null = null;
  private palette: StagePalette | null = null;
  private readonly light = new Vector3();
  private readonly alignRad: number;

  constructor(airframe: ShapeSource, runway: RunwaySetup | null) {
    this.shape = shapeAirframe(airframe);
    this.rig = new ViewRig(this.shape, runway);
    this.alignRad = runway?.headingRad ?? 0;
    this.ground = new GroundPlane(this.shape.spanM);
    this.runway = runway === null ? null : new Runway(runway, this.shape.spanM);
    this.cue = new HeightCue(this.shape);
    this.aeroplane = new Aeroplane(this.shape, 'solid');
    this.root.add(this.ground.object);
    if (this.runway !== null) this.root.add(this.runway.object);
    this.root.add(this.ribbon.object, this.cue.object, this.aeroplane.object);
  }

  setColours(palette: StagePalette): void {
    this.palette = palette;
    for (const part of [this.ground, this.runway, this.ribbon, this.cue, this.aeroplane, this.ghost])
      part?.setColours(palette);
  }

  /** The aeroplane as an uploaded model, or drawn from its geometry. */
  wear(skin: Object3D | null): void {
    this.aeroplane.wear(skin);
  }

  /** Poses everything for one instant. */
  update(now: Observation, ghost: Observation | null, plan: FramePlan): void {
    const palette = this.palette;
    if (palette === null) return;
    this.rig.update(plan.camera, now, plan.width / Math.max(1, plan.height));
    const { camera } = this.rig;
    this.aeroplane.pose(now);
    const place = this.aeroplane.object.position;
    this.ground.update(place, camera, this.alignRad, plan.height);
    this.cue.update(place.x, place.y, place.z, now.psiRad);
    this.ribbon.object.visible = plan.ribbon;
    if (plan.ribbon) this.ribbon.update(this.history, now.tick, place.x, place.y, place.z);
    if (ghost !== null) this.raiseGhost(palette).pose(ghost);
    if (this.ghost !== null) this.ghost.object.visible = ghost !== null;
    this.root.updateMatrixWorld(true);
    lightInto(this.light, this.rig.lookAzimuthRad);
    this.aeroplane.shade(this.light, camera.position, palette);
    if (ghost !== null) this.ghost?.shade(this.light, camera.position, palette);
  }

  dispose(): void {
    for (const part of [this.ground, this.runway, this.ribbon, this.cue, this.aeroplane, this.ghost]) part?.dispose();
    this.root.removeFromParent();
  }

  /** The reference pilot's aeroplane, an ink outline; built when first wanted. */
  private raiseGhost(palette: StagePalette): Aeroplane {
    if (this.ghost === null) {
      this.ghost = new Aeroplane(this.shape, 'outline');
      this.ghost.setColours(palette);
      this.root.add(this.ghost.object);
    }
    return this.ghost;
  }
}
