/**
 * Orbit by pointer, wheel and touch: three's OrbitControls turn a stand-in camera round the origin; the difference to
 * the view's own stand goes to the rig. Nothing is damped, so nothing moves by itself.
 */
import { PerspectiveCamera } from 'three';
import { OrbitControls } from 'three/examples/jsm/controls/OrbitControls.js';
import type { CameraName } from '../stage-types.ts';
import { ORBITABLE, standOf, type ViewRig } from './view-rig.ts';

export class OrbitPointer {
  private readonly standIn = new PerspectiveCamera(40, 1, 0.01, 1000);
  private readonly controls: OrbitControls;
  private name: CameraName = 'chase';
  private quiet = false;

  /** `changed` is called after each turn by the user. */
  constructor(
    element: HTMLElement,
    private readonly rig: ViewRig,
    changed: () => void,
  ) {
    this.controls = new OrbitControls(this.standIn, element);
    this.controls.enablePan = false;
    this.controls.enableDamping = false;
    this.controls.rotateSpeed = 0.6;
    this.controls.minDistance = 0.35;
    this.controls.maxDistance = 3;
    this.controls.addEventListener('change', () => {
      if (this.quiet) return;
      this.read();
      changed();
    });
    this.reset('chase');
  }

  /** Back to the view's own stand. */
  reset(name: CameraName): void {
    this.name = name;
    this.rig.resetOrbit();
    this.controls.enabled = ORBITABLE.has(name);
    if (!this.controls.enabled) return;
    const stand = standOf(name);
    const level = Math.cos(stand.elevationRad);
    this.quiet = true;
    this.standIn.position.set(
      level * Math.sin(stand.azimuthRad),
      Math.sin(stand.elevationRad),
      level * Math.cos(stand.azimuthRad),
    );
    this.controls.target.set(0, 0, 0);
    this.controls.update();
    this.quiet = false;
  }

  dispose(): void {
    this.controls.dispose();
  }

  private read(): void {
    const stand = standOf(this.name);
    this.rig.orbit.azimuthRad = this.controls.getAzimuthalAngle() - stand.azimuthRad;
    this.rig.orbit.elevationRad = Math.PI / 2 - this.controls.getPolarAngle() - stand.elevationRad;
    this.rig.orbit.zoom = this.controls.getDistance();
  }
}
