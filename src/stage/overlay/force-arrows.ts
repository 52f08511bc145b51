/**
 * Where each arrow starts, how it points and how long it is, in the scene: the observation's own numbers times the scales.
 * Stability axes (x forward along the trimmed path, y right, z down) carry the forces, as in the model; weight is vertical.
 */
import { Quaternion, Vector3 } from 'three';
import type { Observation } from '#shared/model/plant-types.ts';
import { airDirectionInto, bodyTurnInto, placeInto, stabilityTurnInto } from '../mesh/orientation.ts';
import { wingAt } from '../shape/engine-shape.ts';
import type { AirframeShape } from '../shape/shape-types.ts';
import type { ArrowId } from '../stage-types.ts';
import { type ArrowScale, LONGEST_ARC_RAD, LONGEST_SPANS } from './arrow-scale.ts';
import type { StraightId } from './arrow-marks.ts';

export interface StraightArrow {
  id: StraightId;
  /** Engine of a thrust arrow; −1 otherwise. */
  engine: number;
  from: Vector3;
  to: Vector3;
  /** Force, N, with the sign along its line. */
  value: number;
  /** Longer than the picture has room for: drawn cut. */
  broken: boolean;
}

export const ARC_POINTS = 25;
export interface ArcArrow {
  id: 'N' | 'L';
  /** Scene points x, y, z in a row; the head is at the last. */
  points: Float32Array;
  value: number;
}

/** Rudder, fin and the rest stand apart so that their lines stay readable; places are the drawing's, forces the model's. */
const YAW_ARC = { radius: 0.52, height: 0.27 };
const ROLL_ARC = { radius: 0.19, ahead: 0.05 };
/** The side force stands ahead of the wing, clear of a stopped propeller; share of the nose length. */
const SIDE_AHEAD = 0.62;
const DRAG_BEHIND_SPANS = 0.1;

export class ForceArrows {
  readonly straight: readonly StraightArrow[];
  readonly arcs: readonly ArcArrow[];
  private readonly place = new Vector3();
  private readonly stability = new Quaternion();
  private readonly body = new Quaternion();
  private readonly air = new Vector3();
  private readonly direction = new Vector3();
  private readonly point = new Vector3();

  constructor(
    private readonly shape: AirframeShape,
    private readonly scale: ArrowScale,
  ) {
    const make = (id: StraightId, engine = -1): StraightArrow => ({
      id,
      engine,
      from: new Vector3(),
      to: new Vector3(),
      value: 0,
      broken: false,
    });
    // drawn in this order, the ones nearest the tail last
    this.straight = [
      make('W'),
      make('LL'),
      make('LR'),
      ...shape.engines.map((_, i) => make('T', i)),
      make('D'),
      make('Y'),
      make('F'),
      make('R'),
    ];
    this.arcs = (['N', 'L'] as const).map((id) => ({ id, points: new Float32Array(3 * ARC_POINTS), value: 0 }));
  }

  update(now: Observation): void {
    placeInto(this.place, now);
    stabilityTurnInto(this.stability, now);
    bodyTurnInto(this.body, now);
    airDirectionInto(this.air, now, this.stability);
    for (const arrow of this.straight) this.lay(arrow, now);
    this.arcs[0].value = now.yawTotalNm;
    this.yawArc(this.arcs[0]);
    this.arcs[1].value = now.rollTotalNm;
    this.rollArc(this.arcs[1]);
  }

  private lay(arrow: StraightArrow, now: Observation): void {
    const { shape } = this;
    switch (arrow.id) {
      case 'R':
        return this.sideways(arrow, shape.rudderCentre.x, shape.rudderCentre.z, now.forceRudderN);
      case 'F':
        return this.sideways(arrow, shape.finCentre.x, shape.finCentre.z, now.forceFinN);
      case 'Y':
        return this.sideways(arrow, SIDE_AHEAD * shape.noseX, -1.15 * shape.bodyRadius, now.forceSideN);
      case 'LL':
        return this.lift(arrow, -1, now.liftLeverM, now.forceLiftLeftN);
      case 'LR':
        return this.lift(arrow, 1, now.liftLeverM, now.forceLiftRightN);
      case 'T': {
        const engine = shape.engines[arrow.engine];
        this.fromBody(arrow, engine.x + 0.01 * shape.spanM, engine.y, engine.z);
        this.direction.set(0, 0, -1).applyQuaternion(this.stability);
        return this.reach(arrow, now.thrustN[arrow.engine]);
      }
      case 'D':
        // on its own line of action: from the mass centre back along the flight path
        this.direction.copy(this.air).negate();
        arrow.from
          .copy(this.direction)
          .multiplyScalar(DRAG_BEHIND_SPANS * shape.spanM)
          .add(this.place);
        return this.reach(arrow, now.forceDragN);
      case 'W':
        this.direction.set(0, -1, 0);
        arrow.from.copy(this.place);
        return this.reach(arrow, now.forceWeightN);
    }
  }

  private sideways(arrow: StraightArrow, x: number, z: number, force: number): void {
    this.fromBody(arrow, x, 0, z);
    this.direction.set(1, 0, 0).applyQuaternion(this.stability);
    this.reach(arrow, force);
  }

  private lift(arrow: StraightArrow, side: -1 | 1, leverM: number, force: number): void {
    const lever = leverM > 0 ? leverM : 0.2 * this.shape.spanM;
    const at = wingAt(this.shape.wing, lever);
    this.fromBody(arrow, at.x - 0.25 * at.chord, side * lever, at.z);
    this.direction.set(0, 1, 0).applyQuaternion(this.stability);
    this.reach(arrow, force);
  }

  /** A point of the aeroplane, body axes, as the start. */
  private fromBody(arrow: StraightArrow, x: number, y: number, z: number): void {
    arrow.from.set(y, -z, -x).applyQuaternion(this.body).add(this.place);
  }

  /** Sets the tip `force` times the scale along the direction. */
  private reach(arrow: StraightArrow, force: number): void {
    const longest = LONGEST_SPANS * this.shape.spanM;
    const wanted = force * this.scale.perNewton[arrow.id];
    const length = Math.min(longest, Math.max(-longest, wanted));
    arrow.value = force;
    arrow.broken = length !== wanted;
    arrow.to.copy(this.direction).multiplyScalar(length).add(arrow.from);
  }

  private sweepOf(moment: number): number {
    return Math.min(LONGEST_ARC_RAD, Math.max(-LONGEST_ARC_RAD, moment * this.scale.perNewtonMetre));
  }

  /** About the yaw axis, above the aeroplane, centred on the nose; positive to the right. */
  private yawArc(arc: ArcArrow): void {
    const sweep = this.sweepOf(arc.value);
    const radius = YAW_ARC.radius * this.shape.spanM;
    for (let i = 0; i < ARC_POINTS; i++) {
      const angle = sweep * (i / (ARC_POINTS - 1) - 0.5);
      this.point.set(radius * Math.sin(angle), YAW_ARC.height * this.shape.spanM, -radius * Math.cos(angle));
      this.put(arc, i);
    }
  }

  /** About the roll axis, over the fuselage, centred on the top; positive right wing down. */
  private rollArc(arc: ArcArrow): void {
    const sweep = this.sweepOf(arc.value);
    const radius = ROLL_ARC.radius * this.shape.spanM;
    for (let i = 0; i < ARC_POINTS; i++) {
      const angle = sweep * (i / (ARC_POINTS - 1) - 0.5);
      this.point.set(radius * Math.sin(angle), radius * Math.cos(angle), -ROLL_ARC.ahead * this.shape.spanM);
      this.put(arc, i);
    }
  }

  private put(arc: ArcArrow, index: number): void {
    this.point
      .applyQuaternion(this.stability)
      .add(this.place)
      .toArray(arc.points, 3 * index);
  }
}

/** Whether an arrow of this id has a start in the data now: a thrust arrow of a dead engine has none. */
export function isDrawn(arrow: StraightArrow, shown: ReadonlySet<ArrowId>): boolean {
  return shown.has(arrow.id) && !(arrow.id === 'T' && arrow.value <= 0);
}
