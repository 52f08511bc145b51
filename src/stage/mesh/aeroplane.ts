/** The aeroplane of one observation: fixed facets, ailerons and rudder about their hinges, engines' marks. */
import { Group, MeshBasicMaterial, type Object3D, Quaternion, Vector3 } from 'three';
import { LineMaterial } from 'three/examples/jsm/lines/LineMaterial.js';
import type { Observation } from '#shared/model/plant-types.ts';
import type { AirframeShape } from '../shape/shape-types.ts';
import type { StagePalette } from '../view/palette.ts';
import { aileronFacets, fixedFacets, rudderFacets, type HingedFacets } from './airframe-facets.ts';
import { FacetedPart } from './faceted-part.ts';
import { bodyTurnInto, placeInto, type Pose } from './orientation.ts';
import { Propulsor, type PropulsorState } from './propulsor.ts';

export type AeroplaneLook = 'solid' | 'outline';
export type AeroplanePose = Pose &
  Pick<Observation, 'aileronRad' | 'rudderRad' | 'engineState' | 'thrustN' | 'thrustAvailableN' | 'timeS'>;

interface Hinged {
  part: FacetedPart;
  axis: Vector3;
}

export class Aeroplane {
  readonly object = new Group();
  private readonly fill: MeshBasicMaterial;
  private readonly inks: Record<'edge' | 'liveRim' | 'deadRim' | 'blade' | 'edgeOnBlade', LineMaterial>;
  private readonly fixed: FacetedPart;
  private readonly leftAileron: Hinged;
  private readonly rightAileron: Hinged;
  private readonly rudder: Hinged;
  private readonly parts: readonly FacetedPart[];
  private readonly propulsors: readonly Propulsor[];
  private readonly turn = new Quaternion();
  private skin: Object3D | null = null;
  private readonly mark: PropulsorState = { engineState: 0, share: 1, timeS: 0 };

  // every material counts as transparent: three.js then draws all objects in order of renderOrder, as the CPU renderer does
  constructor(
    readonly shape: AirframeShape,
    private readonly look: AeroplaneLook,
  ) {
    this.fill = new MeshBasicMaterial({
      vertexColors: true,
      toneMapped: false,
      transparent: true,
      colorWrite: look === 'solid',
    });
    this.inks = {
      edge: inkLine(look === 'solid' ? 1.3 : 1.25),
      liveRim: inkLine(1.5),
      deadRim: inkLine(2),
      blade: inkLine(3.5),
      edgeOnBlade: inkLine(1.4),
    };
    const style = { fill: this.fill, edge: this.inks.edge };
    this.fixed = new FacetedPart(fixedFacets(shape), style);
    const hang = (facets: HingedFacets): Hinged => {
      const part = new FacetedPart(facets.mesh, style);
      part.object.position.set(facets.origin[1], -facets.origin[2], -facets.origin[0]);
      return { part, axis: new Vector3(facets.axis[1], -facets.axis[2], -facets.axis[0]) };
    };
    this.leftAileron = hang(aileronFacets(shape, -1));
    this.rightAileron = hang(aileronFacets(shape, 1));
    this.rudder = hang(rudderFacets(shape));
    this.parts = [this.fixed, this.leftAileron.part, this.rightAileron.part, this.rudder.part];
    this.propulsors = look === 'solid' ? shape.engines.map((engine) => new Propulsor(engine, this.inks)) : [];
    for (const part of this.parts) this.object.add(part.object);
    for (const propulsor of this.propulsors) this.object.add(propulsor.object);
    this.object.traverse((child) => {
      child.raycast = () => undefined;
    });
  }

  /** Shows an uploaded model instead of the drawn facets, or the facets again; the engines' marks stay. */
  wear(skin: Object3D | null): void {
    if (this.skin !== null) this.object.remove(this.skin);
    this.skin = skin;
    if (skin !== null) this.object.add(skin);
    for (const part of this.parts) part.object.visible = skin === null;
  }

  /** Places, turns and moves everything; call `shade` once the matrices are up to date. */
  pose(now: AeroplanePose): void {
    placeInto(this.object.position, now);
    this.object.quaternion.copy(bodyTurnInto(this.turn, now));
    // delta_a > 0 rolls right: left trailing edge down, right one up
    this.leftAileron.part.object.quaternion.setFromAxisAngle(this.leftAileron.axis, now.aileronRad);
    this.rightAileron.part.object.quaternion.setFromAxisAngle(this.rightAileron.axis, -now.aileronRad);
    this.rudder.part.object.quaternion.setFromAxisAngle(this.rudder.axis, now.rudderRad);
    for (let i = 0; i < this.propulsors.length; i++) {
      const available = now.thrustAvailableN[i];
      this.mark.engineState = now.engineState[i];
      this.mark.share = available > 0 ? now.thrustN[i] / available : 1;
      this.mark.timeS = now.timeS;
      this.propulsors[i].update(this.mark);
    }
  }

  /** Tones and outlines for a light direction and an eye, both in the scene. */
  shade(light: Vector3, eye: Vector3, palette: StagePalette): void {
    for (const part of this.parts) part.update(light, eye, palette.tones, palette.edge);
  }

  setColours(palette: StagePalette): void {
    const { edge, liveRim, deadRim, blade, edgeOnBlade } = this.inks;
    const outline = this.look === 'solid' ? palette.edge : palette.rgb.ink2;
    edge.color.setRGB(outline.r, outline.g, outline.b);
    liveRim.color.setRGB(palette.rgb.live.r, palette.rgb.live.g, palette.rgb.live.b);
    for (const ink of [deadRim, blade, edgeOnBlade])
      ink.color.setRGB(palette.rgb.dead.r, palette.rgb.dead.g, palette.rgb.dead.b);
    for (const part of this.parts) part.repaint();
    for (const propulsor of this.propulsors) propulsor.setColours(palette);
  }

  dispose(): void {
    for (const part of this.parts) part.dispose();
    for (const propulsor of this.propulsors) propulsor.dispose();
    this.fill.dispose();
    for (const ink of Object.values(this.inks)) ink.dispose();
  }
}

/** A line pulled a little toward the eye, so that it wins over the facets it borders. */
function inkLine(width: number): LineMaterial {
  return new LineMaterial({
    linewidth: width,
    toneMapped: false,
    transparent: true,
    depthWrite: false,
    polygonOffset: true,
    polygonOffsetFactor: -2,
    polygonOffsetUnits: -400,
  });
}
