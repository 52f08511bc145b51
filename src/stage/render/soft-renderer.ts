/**
 * Draws a three.js scene into a 2-D canvas without WebGL: our own z-buffer.
 * Knows what the stage uses: meshes with MeshBasicMaterial (vertex colours or one colour) or PatternMaterial,
 * polygons with outlines (ground layers, without depth), LineSegments2 with LineMaterial. Anything else is an error.
 * Colours are screen colours (the stage sets them so); no lights, fog, textures or tone mapping.
 */
import {
  type Camera,
  Color,
  LinearSRGBColorSpace,
  NoToneMapping,
  type Object3D,
  PCFShadowMap,
  type Scene,
  Vector2,
} from 'three';
import { SoftPass } from './soft-pass.ts';
import { packColour, Surface } from './surface.ts';

export class SoftRenderer {
  readonly isSoftRenderer = true;
  // what TresJS expects of a renderer
  readonly shadowMap = { enabled: false, type: PCFShadowMap };
  toneMapping = NoToneMapping;
  toneMappingExposure = 1;
  outputColorSpace: string = LinearSRGBColorSpace;
  readonly info = {
    memory: { geometries: 0, textures: 0 },
    render: { calls: 0, triangles: 0, lines: 0, points: 0, frame: 0 },
    programs: [],
    reset: (): void => undefined,
  };
  private readonly context: CanvasRenderingContext2D;
  private readonly surface = new Surface();
  private readonly pass = new SoftPass(this.surface);
  private readonly clearColour = new Color(0, 0, 0);
  private readonly cssSize = new Vector2();
  private ratio = 1;

  constructor(readonly domElement: HTMLCanvasElement) {
    const context = domElement.getContext('2d', { alpha: false });
    if (context === null) throw new Error('This browser gives the stage neither WebGL nor a 2-D canvas.');
    this.context = context;
  }

  setSize(width: number, height: number, updateStyle = true): void {
    this.cssSize.set(width, height);
    const w = Math.floor(width * this.ratio);
    const h = Math.floor(height * this.ratio);
    if (this.domElement.width !== w) this.domElement.width = w;
    if (this.domElement.height !== h) this.domElement.height = h;
    if (updateStyle) {
      this.domElement.style.width = `${width}px`;
      this.domElement.style.height = `${height}px`;
    }
    this.surface.resize(w, h);
    this.pass.resize();
  }

  getSize(target: Vector2): Vector2 {
    return target.copy(this.cssSize);
  }

  setPixelRatio(ratio: number): void {
    this.ratio = ratio;
    this.setSize(this.cssSize.x, this.cssSize.y, false);
  }

  getPixelRatio(): number {
    return this.ratio;
  }

  setClearColor(colour: Color | string | number): void {
    if (colour instanceof Color) this.clearColour.copy(colour);
    else this.clearColour.set(colour);
  }

  /** One frame, from the far layer to the near one, in order of `renderOrder`. */
  render(scene: Object3D, camera: Camera): void {
    const image = this.surface.image;
    if (image === null) return;
    scene.updateMatrixWorld();
    if (camera.parent === null) camera.updateMatrixWorld();
    const background = (scene as Partial<Scene>).background; // only a Scene has one
    const clear = background instanceof Color ? background : this.clearColour;
    this.surface.clear(packColour(clear.r, clear.g, clear.b));
    this.pass.draw(scene, camera, this.ratio);
    this.context.putImageData(image, 0, 0);
    const counts = this.info.render;
    counts.frame++;
    counts.calls = this.pass.calls;
    counts.triangles = this.pass.triangles;
    counts.lines = this.pass.lines;
  }

  dispose(): void {
    this.surface.resize(0, 0);
  }
}
