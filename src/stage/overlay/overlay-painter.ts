/** Draws all flat marks of one frame on a 2-D canvas: flight marks, arrows, then tags clear of each other. */
import { Vector3, type PerspectiveCamera } from 'three';
import type { Observation } from '#shared/model/plant-types.ts';
import type { AirframeShape } from '../shape/shape-types.ts';
import type { ArrowId } from '../stage-types.ts';
import type { StagePalette } from '../view/palette.ts';
import { drawArc, drawStraight } from './arrow-marks.ts';
import type { ArrowScale } from './arrow-scale.ts';
import { FlightMarks } from './flight-marks.ts';
import { ARC_POINTS, ForceArrows, isDrawn } from './force-arrows.ts';
import { Projector } from './projector.ts';
import { TagLayout } from './tag-layout.ts';

const TAG_HEIGHT = 18;
const TAG_DISTANCE = 14;
/** A tag that moved further than this is joined to its arrow by a thin line. */
const LEADER_FROM = 18;

interface PendingTag {
  id: ArrowId;
  x: number;
  y: number;
  /** Outward direction. */
  dx: number;
  dy: number;
}

export class OverlayPainter {
  private readonly projector = new Projector();
  private readonly tags = new TagLayout();
  private readonly arrows: ForceArrows;
  private readonly marks: FlightMarks;
  private readonly arc = new Float32Array(2 * ARC_POINTS);
  private readonly point = new Vector3();
  private readonly pending: PendingTag[] = [];
  private pendingCount = 0;

  constructor(shape: AirframeShape, scale: ArrowScale) {
    this.arrows = new ForceArrows(shape, scale);
    this.marks = new FlightMarks(shape);
  }

  /** `ctx` draws in CSS pixels. `note` is the line at the lower left (grid scale). */
  paint(
    ctx: CanvasRenderingContext2D,
    now: Observation,
    camera: PerspectiveCamera,
    width: number,
    height: number,
    shown: ReadonlySet<ArrowId>,
    palette: StagePalette,
    note: string,
    fromNose: boolean,
  ): void {
    this.projector.set(camera, width, height);
    this.tags.begin(width, height);
    this.pendingCount = 0;
    this.arrows.update(now);
    if (!fromNose) this.marks.draw(ctx, now, this.projector, palette, this.tags);
    ctx.lineJoin = 'miter';
    this.drawForces(ctx, shown, palette);
    this.drawMoments(ctx, shown, palette);
    this.drawTags(ctx, palette);
    ctx.font = `500 11px ${palette.monoFont}`;
    ctx.textAlign = 'left';
    ctx.textBaseline = 'alphabetic';
    ctx.fillStyle = palette.css.ink3;
    ctx.fillText(note, 8, height - 8);
  }

  private drawForces(ctx: CanvasRenderingContext2D, shown: ReadonlySet<ArrowId>, palette: StagePalette): void {
    const { projector } = this;
    for (const arrow of this.arrows.straight) {
      if (!isDrawn(arrow, shown)) continue;
      if (!projector.project(arrow.from)) continue;
      const { x, y } = projector;
      if (!projector.project(arrow.to)) continue;
      drawStraight(ctx, arrow.id, x, y, projector.x, projector.y, arrow.broken, palette.css[arrow.id], palette.css.sky);
      this.tags.block(projector.x, projector.y, 4, 4);
      this.wantTag(arrow.id, projector.x, projector.y, projector.x - x, projector.y - y);
    }
  }

  private drawMoments(ctx: CanvasRenderingContext2D, shown: ReadonlySet<ArrowId>, palette: StagePalette): void {
    for (const arrow of this.arrows.arcs) {
      if (!shown.has(arrow.id)) continue;
      let inFront = true;
      for (let i = 0; i < ARC_POINTS && inFront; i++) {
        inFront = this.projector.project(this.point.fromArray(arrow.points, 3 * i));
        this.arc[2 * i] = this.projector.x;
        this.arc[2 * i + 1] = this.projector.y;
      }
      if (!inFront) continue;
      drawArc(ctx, arrow.id, this.arc, ARC_POINTS, palette.css[arrow.id], palette.css.sky);
      const last = 2 * (ARC_POINTS - 1);
      const middle = ARC_POINTS - 1;
      this.tags.block(this.arc[last], this.arc[last + 1], 4, 4);
      // the yaw tag stands beyond the head, the roll tag above the middle of its arc
      if (arrow.id === 'N') {
        const along = Math.sign(this.arc[last] - this.arc[0]) || 1;
        this.wantTag('N', this.arc[last] + 10 * along, this.arc[last + 1] - 6, along, -0.8);
      } else {
        const bulgeX = this.arc[middle] - (this.arc[0] + this.arc[last]) / 2;
        const bulgeY = this.arc[middle + 1] - (this.arc[1] + this.arc[last + 1]) / 2;
        const flat = Math.hypot(bulgeX, bulgeY) < 1;
        this.wantTag('L', this.arc[middle], this.arc[middle + 1], flat ? 0 : bulgeX, flat ? -1 : bulgeY);
      }
    }
  }

  private wantTag(id: ArrowId, x: number, y: number, dx: number, dy: number): void {
    // a tag belongs to a mark in the picture
    if (x < -40 || y < -40 || x > this.projector.width + 40 || y > this.projector.height + 40) return;
    if (this.pendingCount === this.pending.length) this.pending.push({ id, x: 0, y: 0, dx: 0, dy: 0 });
    const tag = this.pending[this.pendingCount++];
    const length = Math.hypot(dx, dy);
    tag.id = id;
    tag.x = x;
    tag.y = y;
    tag.dx = length < 1e-3 ? 0 : dx / length;
    tag.dy = length < 1e-3 ? -1 : dy / length;
  }

  private drawTags(ctx: CanvasRenderingContext2D, palette: StagePalette): void {
    ctx.font = `700 12px ${palette.monoFont}`;
    ctx.textAlign = 'center';
    ctx.textBaseline = 'middle';
    for (let i = 0; i < this.pendingCount; i++) {
      const tag = this.pending[i];
      const halfWidth = tag.id.length > 1 ? 11 : 8;
      this.tags.place(
        tag.x + TAG_DISTANCE * tag.dx,
        tag.y + TAG_DISTANCE * tag.dy,
        tag.dx,
        tag.dy,
        halfWidth,
        TAG_HEIGHT / 2,
      );
      const { x, y } = this.tags;
      const ink = palette.css[tag.id];
      if (this.tags.moved > LEADER_FROM) {
        ctx.beginPath();
        ctx.moveTo(tag.x, tag.y);
        ctx.lineTo(x, y);
        ctx.lineWidth = 1;
        ctx.strokeStyle = ink;
        ctx.stroke();
      }
      ctx.beginPath();
      ctx.roundRect(x - halfWidth, y - TAG_HEIGHT / 2, 2 * halfWidth, TAG_HEIGHT, 2);
      ctx.fillStyle = palette.css.sky;
      ctx.fill();
      ctx.lineWidth = 1.5;
      ctx.strokeStyle = ink;
      ctx.stroke();
      ctx.fillStyle = palette.css.ink;
      ctx.fillText(tag.id, x, y + 0.5);
    }
  }
}
