/**
 * Where it points and where it goes: nose line, flight path through the air with its ring, the angle between them,
 * relative wind, and the ground track's diamond where wind parts it from the flight path.
 */
import { Quaternion, Vector3 } from 'three';
import type { Observation } from '#shared/model/plant-types.ts';
import {
  airDirectionInto,
  bodyTurnInto,
  groundDirectionInto,
  placeInto,
  stabilityTurnInto,
} from '../mesh/orientation.ts';
import type { AirframeShape } from '../shape/shape-types.ts';
import type { StagePalette } from '../view/palette.ts';
import type { Projector } from './projector.ts';
import type { TagLayout } from './tag-layout.ts';

const PATH_SPANS = 0.78;
const NOSE_SPANS = 0.74;
/** The angle is drawn from this much sideslip, the diamond from this much drift; rad. */
const LEAST_ANGLE = 0.009;
const ARC_STEPS = 12;
const NOSE_DASH = [12, 3, 2, 3];
const NO_DASH: number[] = [];
/** Streaks of the relative wind: across (spans) and along the path (share of its length). */
const STREAKS: readonly (readonly [number, number])[] = [
  [-0.13, 1.22],
  [0, 1.34],
  [0.13, 1.22],
];

export class FlightMarks {
  private readonly place = new Vector3();
  private readonly stability = new Quaternion();
  private readonly body = new Quaternion();
  private readonly air = new Vector3();
  private readonly ground = new Vector3();
  private readonly right = new Vector3();
  private readonly start = new Vector3();
  private readonly point = new Vector3();
  private readonly end = { x: 0, y: 0 };

  constructor(private readonly shape: AirframeShape) {}

  draw(
    ctx: CanvasRenderingContext2D,
    now: Observation,
    projector: Projector,
    palette: StagePalette,
    tags: TagLayout,
  ): void {
    placeInto(this.place, now);
    stabilityTurnInto(this.stability, now);
    bodyTurnInto(this.body, now);
    airDirectionInto(this.air, now, this.stability);
    groundDirectionInto(this.ground, now, this.air);
    // both lines start in the fuselage behind the nose, on its axis
    this.start
      .set(0, 0, -0.8 * this.shape.noseX)
      .applyQuaternion(this.body)
      .add(this.place);
    const { ink, ink2, sky } = palette.css;
    ctx.font = `600 12px ${palette.monoFont}`;
    ctx.lineJoin = 'round';
    this.wind(ctx, now, projector, ink2);
    const nose = this.noseLine(ctx, projector, ink);
    const noseX = this.end.x;
    const noseY = this.end.y;
    const path = this.pathLine(ctx, projector, ink, sky);
    const pathX = this.end.x;
    const pathY = this.end.y;
    if (path) this.label(ctx, 'flight path', pathX + 13, pathY, 'left', ink, sky, tags);
    if (nose) this.label(ctx, 'nose', noseX - 6, noseY - 3, noseX <= pathX ? 'right' : 'left', ink, sky, tags);
    if (Math.abs(now.betaRad) >= LEAST_ANGLE && nose && path) this.angle(ctx, now.betaRad, projector, palette, tags);
    this.track(ctx, projector, palette, tags);
  }

  private reach(projector: Projector, direction: Vector3, spans: number): boolean {
    return projector.project(
      this.point
        .copy(direction)
        .multiplyScalar(spans * this.shape.spanM)
        .add(this.start),
    );
  }

  private noseLine(ctx: CanvasRenderingContext2D, projector: Projector, ink: string): boolean {
    if (!projector.project(this.point.set(0, 0, -this.shape.noseX).applyQuaternion(this.body).add(this.place)))
      return false;
    const { x, y } = projector;
    this.right.set(0, 0, -1).applyQuaternion(this.body);
    if (!this.reach(projector, this.right, NOSE_SPANS)) return false;
    ctx.beginPath();
    ctx.moveTo(x, y);
    ctx.lineTo(projector.x, projector.y);
    ctx.setLineDash(NOSE_DASH);
    ctx.lineWidth = 1;
    ctx.strokeStyle = ink;
    ctx.stroke();
    ctx.setLineDash(NO_DASH);
    this.end.x = projector.x;
    this.end.y = projector.y;
    return true;
  }

  private pathLine(ctx: CanvasRenderingContext2D, projector: Projector, ink: string, sky: string): boolean {
    if (!projector.project(this.start)) return false;
    const { x, y } = projector;
    if (!this.reach(projector, this.air, PATH_SPANS)) return false;
    ctx.beginPath();
    ctx.moveTo(x, y);
    ctx.lineTo(projector.x, projector.y);
    ctx.lineWidth = 6;
    ctx.strokeStyle = sky;
    ctx.stroke();
    ctx.lineWidth = 2.5;
    ctx.strokeStyle = ink;
    ctx.stroke();
    ctx.beginPath();
    ctx.arc(projector.x, projector.y, 7, 0, 2 * Math.PI);
    ctx.fillStyle = sky;
    ctx.fill();
    ctx.lineWidth = 2;
    ctx.stroke();
    ctx.beginPath();
    ctx.arc(projector.x, projector.y, 2, 0, 2 * Math.PI);
    ctx.fillStyle = ink;
    ctx.fill();
    this.end.x = projector.x;
    this.end.y = projector.y;
    return true;
  }

  /** The sideslip as an arc from the nose line to above or below the ring, with its value. */
  private angle(
    ctx: CanvasRenderingContext2D,
    beta: number,
    projector: Projector,
    palette: StagePalette,
    tags: TagLayout,
  ): void {
    ctx.beginPath();
    let begun = false;
    let midX = 0;
    let midY = 0;
    for (let i = 0; i <= ARC_STEPS; i++) {
      const turn = (beta * i) / ARC_STEPS;
      this.right.set(Math.sin(turn), 0, -Math.cos(turn)).applyQuaternion(this.body);
      if (!this.reach(projector, this.right, NOSE_SPANS)) return;
      if (begun) ctx.lineTo(projector.x, projector.y);
      else ctx.moveTo(projector.x, projector.y);
      begun = true;
      if (i === ARC_STEPS / 2) {
        midX = projector.x;
        midY = projector.y;
      }
    }
    ctx.lineWidth = 1.5;
    ctx.strokeStyle = palette.css.ink;
    ctx.stroke();
    const text = `β ${((Math.abs(beta) * 180) / Math.PI).toFixed(1)}° ${beta > 0 ? 'L' : 'R'}`;
    this.label(ctx, text, midX, midY - 12, 'center', palette.css.ink, palette.css.sky, tags);
  }

  /** Three streaks of air coming in along the relative wind, gusts included. */
  private wind(ctx: CanvasRenderingContext2D, now: Observation, projector: Projector, ink: string): void {
    const gust = now.tasMps > 1 ? now.gustLateralMps / now.tasMps : 0;
    const angle = now.betaRad - gust;
    this.right.set(Math.cos(angle), 0, Math.sin(angle)).applyQuaternion(this.stability);
    const towards = this.ray.set(Math.sin(angle), 0, -Math.cos(angle)).applyQuaternion(this.stability);
    const span = this.shape.spanM;
    for (const [across, along] of STREAKS) {
      this.point
        .copy(towards)
        .multiplyScalar(along * PATH_SPANS * span)
        .addScaledVector(this.right, across * span)
        .add(this.start);
      if (!projector.project(this.point)) continue;
      const { x, y } = projector;
      this.point.addScaledVector(towards, -0.2 * span);
      if (!projector.project(this.point)) continue;
      this.streak(ctx, x, y, projector.x, projector.y, ink);
    }
  }

  private streak(ctx: CanvasRenderingContext2D, x0: number, y0: number, x1: number, y1: number, ink: string): void {
    const length = Math.hypot(x1 - x0, y1 - y0);
    if (length < 4) return;
    const ux = (x1 - x0) / length;
    const uy = (y1 - y0) / length;
    ctx.beginPath();
    ctx.moveTo(x0, y0);
    ctx.lineTo(x1, y1);
    ctx.moveTo(x1 - 5 * ux - 3 * uy, y1 - 5 * uy + 3 * ux);
    ctx.lineTo(x1, y1);
    ctx.lineTo(x1 - 5 * ux + 3 * uy, y1 - 5 * uy - 3 * ux);
    ctx.lineWidth = 1;
    ctx.strokeStyle = ink;
    ctx.stroke();
  }

  private readonly ray = new Vector3();

  private track(ctx: CanvasRenderingContext2D, projector: Projector, palette: StagePalette, tags: TagLayout): void {
    if (this.ground.angleTo(this.air) < LEAST_ANGLE) return;
    if (!this.reach(projector, this.ground, PATH_SPANS)) return;
    const { x, y } = projector;
    ctx.beginPath();
    ctx.moveTo(x, y - 8);
    ctx.lineTo(x + 7, y);
    ctx.lineTo(x, y + 8);
    ctx.lineTo(x - 7, y);
    ctx.closePath();
    ctx.lineWidth = 4.5;
    ctx.strokeStyle = palette.css.sky;
    ctx.stroke();
    ctx.lineWidth = 1.5;
    ctx.strokeStyle = palette.css.ink;
    ctx.stroke();
    this.label(ctx, 'track', x, y + 17, 'center', palette.css.ink, palette.css.sky, tags);
  }

  /** Text with a ground halo; its box is taken before the tags find their places. */
  private label(
    ctx: CanvasRenderingContext2D,
    text: string,
    x: number,
    y: number,
    align: 'left' | 'right' | 'center',
    ink: string,
    sky: string,
    tags: TagLayout,
  ): void {
    const half = (text.length * 7.2) / 2;
    const centre = align === 'center' ? x : align === 'left' ? x + half : x - half;
    tags.place(centre, y, 0, -1, half, 7);
    ctx.textAlign = 'center';
    ctx.textBaseline = 'middle';
    ctx.lineWidth = 4;
    ctx.strokeStyle = sky;
    ctx.strokeText(text, tags.x, tags.y);
    ctx.fillStyle = ink;
    ctx.fillText(text, tags.x, tags.y);
  }
}
