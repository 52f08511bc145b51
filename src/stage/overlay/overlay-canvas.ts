/** The canvas above the picture: sized in device pixels, wiped and painted each frame. */
import type { Observation } from '#shared/model/plant-types.ts';
import type { AirframeShape } from '../shape/shape-types.ts';
import type { StageScene } from '../stage-scene.ts';
import type { ArrowId, CameraName } from '../stage-types.ts';
import type { StagePalette } from '../view/palette.ts';
import type { ArrowScale } from './arrow-scale.ts';
import { OverlayPainter } from './overlay-painter.ts';

export class OverlayCanvas {
  private readonly context: CanvasRenderingContext2D;
  private painter: OverlayPainter;

  constructor(
    private readonly canvas: HTMLCanvasElement,
    shape: AirframeShape,
    scale: ArrowScale,
  ) {
    const context = canvas.getContext('2d');
    if (context === null) throw new Error('This browser gives the stage no 2-D canvas for its arrows.');
    this.context = context;
    this.painter = new OverlayPainter(shape, scale);
  }

  setAirframe(shape: AirframeShape, scale: ArrowScale): void {
    this.painter = new OverlayPainter(shape, scale);
  }

  paint(
    now: Observation,
    scene: StageScene,
    camera: CameraName,
    arrows: ReadonlySet<ArrowId>,
    palette: StagePalette,
    width: number,
    height: number,
    ratio: number,
  ): void {
    const w = Math.round(width * ratio);
    const h = Math.round(height * ratio);
    if (this.canvas.width !== w) this.canvas.width = w;
    if (this.canvas.height !== h) this.canvas.height = h;
    const ctx = this.context;
    ctx.setTransform(1, 0, 0, 1, 0, 0);
    ctx.clearRect(0, 0, w, h);
    ctx.setTransform(ratio, 0, 0, ratio, 0, 0);
    const note = `grid ${scene.ground.spacingM} m`;
    this.painter.paint(ctx, now, scene.rig.camera, width, height, arrows, palette, note, camera === 'nose');
  }
}
