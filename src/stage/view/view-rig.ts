/**
 * Cameras. Chase, top and side look at the mass centre from a frame that turns with the flight path through the air:
 * that path is the heading smoothed by the aeroplane's own mass, a function of the state alone. So nothing lags, a yaw of
 * the nose is seen as a yaw, and the same instant always gives the same picture, however it was reached.
 * The user's orbit (azimuth, elevation, distance) is added in that frame and taken back by `resetOrbit`.
 */
import { PerspectiveCamera, Quaternion, Vector3 } from 'three';
import type { RunwaySetup } from '#shared/model/plant-types.ts';
import { drawnRunwayLength } from '../ground/runway.ts';
import {
  azimuthOf,
  airDirectionInto,
  bodyTurnInto,
  placeInto,
  type Pose,
  stabilityTurnInto,
} from '../mesh/orientation.ts';
import type { AirframeShape } from '../shape/shape-types.ts';
import type { CameraName } from '../stage-types.ts';

const RAD = Math.PI / 180;

/** A standing point on a sphere round the mass centre: azimuth from straight behind (positive: standing to the right), elevation, distance in spans. */
interface Stand {
  azimuthRad: number;
  elevationRad: number;
  spans: number;
  /** How far above the mass centre the view is aimed; rad. */
  aimUpRad: number;
}

const STANDS: Record<'chase' | 'top' | 'side', Stand> = {
  chase: { azimuthRad: 25 * RAD, elevationRad: 18.6 * RAD, spans: 2.1, aimUpRad: 7.2 * RAD },
  top: { azimuthRad: 0, elevationRad: 89.9 * RAD, spans: 2.6, aimUpRad: 0 },
  side: { azimuthRad: 90 * RAD, elevationRad: 5 * RAD, spans: 2.3, aimUpRad: 0 },
};

/** Stand of an orbitable view; of the chase view for the others. */
export function standOf(name: CameraName): Readonly<Stand> {
  return name === 'top' || name === 'side' ? STANDS[name] : STANDS.chase;
}

/** Vertical field of the default view; narrower pictures keep the width that belongs to 1.8 : 1. */
const FIELD_RAD = 41.8 * RAD;
const FIELD_ASPECT = 1.8;
const NOSE_FIELD_RAD = 56 * RAD;
/** Near plane in spans; far beyond the ground's rim. */
const NEAR_SPANS = 0.02;
const FAR_M = 5e6;
/** The tower: beside the middle of the runway, or of each 4 km square without one. */
const TOWER_OFFSET_M = 140;
const TOWER_HEIGHT_M = 18;
const TOWER_SQUARE_M = 4000;
/** Share of the picture's width that the wings take in the tower's telescope, and its narrowest field. */
const TOWER_SHARE = 0.3;
const TOWER_FIELD_MIN_RAD = 2.5 * RAD;

/** What the pointer may turn. */
export const ORBITABLE: ReadonlySet<CameraName> = new Set(['chase', 'top', 'side']);

export class ViewRig {
  readonly camera = new PerspectiveCamera(41.8, FIELD_ASPECT, 0.1, FAR_M);
  /** Added by the user: rad, rad, factor. */
  readonly orbit = { azimuthRad: 0, elevationRad: 0, zoom: 1 };
  /** Azimuth the light and the labels go by: where the camera looks. */
  lookAzimuthRad = 0;
  private readonly place = new Vector3();
  private readonly eye = new Vector3();
  private readonly aim = new Vector3();
  private readonly air = new Vector3();
  private readonly turn = new Quaternion();

  constructor(
    private readonly shape: AirframeShape,
    private readonly runway: RunwaySetup | null,
  ) {}

  resetOrbit(): void {
    this.orbit.azimuthRad = 0;
    this.orbit.elevationRad = 0;
    this.orbit.zoom = 1;
  }

  /** Puts the camera where this view stands at this instant. */
  update(name: CameraName, pose: Pose, aspect: number): void {
    const { camera } = this;
    placeInto(this.place, pose);
    stabilityTurnInto(this.turn, pose);
    airDirectionInto(this.air, pose, this.turn);
    camera.aspect = aspect;
    camera.near = NEAR_SPANS * this.shape.spanM;
    camera.far = FAR_M;
    camera.up.set(0, 1, 0);
    if (name === 'nose') this.nose(pose);
    else if (name === 'tower') this.tower();
    else this.stand(STANDS[name], azimuthOf(this.air));
    camera.updateProjectionMatrix();
    camera.updateMatrixWorld();
    camera.getWorldDirection(this.aim);
    this.lookAzimuthRad = Math.hypot(this.aim.x, this.aim.z) > 0.05 ? azimuthOf(this.aim) : azimuthOf(this.air);
  }

  private stand(stand: Stand, pathAzimuth: number): void {
    const { camera, orbit, place } = this;
    const distance = stand.spans * this.shape.spanM * orbit.zoom;
    const elevation = Math.min(89.9 * RAD, Math.max(-25 * RAD, stand.elevationRad + orbit.elevationRad));
    // the direction in which the camera looks, over the ground
    const look = pathAzimuth - stand.azimuthRad - orbit.azimuthRad;
    const level = distance * Math.cos(elevation);
    this.eye.set(
      place.x - level * Math.sin(look),
      place.y + distance * Math.sin(elevation),
      place.z + level * Math.cos(look),
    );
    this.eye.y = Math.max(this.eye.y, 0.12 * this.shape.spanM);
    this.setField(FIELD_RAD);
    camera.position.copy(this.eye);
    if (elevation > 80 * RAD) camera.up.set(Math.sin(look), 0, -Math.cos(look));
    camera.lookAt(place);
    if (stand.aimUpRad !== 0) camera.rotateX(stand.aimUpRad);
  }

  private nose(pose: Pose): void {
    const { camera, shape } = this;
    bodyTurnInto(this.turn, pose);
    const forward = shape.noseX - 0.16 * shape.lengthM;
    this.eye
      .set(0, 1.25 * shape.bodyRadius, -forward)
      .applyQuaternion(this.turn)
      .add(this.place);
    camera.near = 0.2 * shape.bodyRadius;
    camera.position.copy(this.eye);
    camera.quaternion.copy(this.turn);
    this.setField(NOSE_FIELD_RAD);
  }

  private tower(): void {
    const { camera, place, runway } = this;
    if (runway === null) {
      const square = (value: number): number => (Math.floor(value / TOWER_SQUARE_M) + 0.5) * TOWER_SQUARE_M;
      camera.position.set(square(place.x) + TOWER_OFFSET_M, Math.max(TOWER_HEIGHT_M, 0.4 * place.y), square(place.z));
    } else {
      const along = runway.thresholdM + drawnRunwayLength(this.shape.spanM) / 2;
      const aside = TOWER_OFFSET_M + runway.widthM;
      const ax = Math.sin(runway.headingRad);
      const az = -Math.cos(runway.headingRad);
      camera.position.set(along * ax - aside * az, TOWER_HEIGHT_M, along * az + aside * ax);
    }
    camera.lookAt(place);
    const distance = camera.position.distanceTo(place);
    const width = this.shape.spanM / TOWER_SHARE / camera.aspect;
    const field = Math.min(FIELD_RAD, Math.max(TOWER_FIELD_MIN_RAD, 2 * Math.atan(width / 2 / Math.max(1, distance))));
    camera.fov = field / RAD;
    camera.near = Math.max(0.2, distance * 0.02);
  }

  private setField(fieldRad: number): void {
    const half = Math.tan(fieldRad / 2) * Math.max(1, FIELD_ASPECT / this.camera.aspect);
    this.camera.fov = (2 * Math.atan(half)) / RAD;
  }
}
