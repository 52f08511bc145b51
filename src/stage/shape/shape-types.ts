/** The parts of a drawn aeroplane; m, body axes: x forward, y right, z down, origin at the mass centre. */
import type { Airframe } from '#shared/model/airframe-schema.ts';

/** What the drawing needs of an airframe. */
export type ShapeSource = Pick<Airframe, 'class' | 'geometry' | 'fin' | 'engines'>;

/** A cross-section of a body of revolution: an ellipse across x. */
export interface Station {
  x: number;
  halfWidth: number;
  halfHeight: number;
  /** Centre of the ellipse, down positive. */
  z: number;
}

/** One half of a lifting surface (the right one, or the fin standing up). */
export interface Panel {
  /** Leading edge at the root and at the tip. */
  root: { x: number; y: number; z: number; chord: number };
  tip: { x: number; y: number; z: number; chord: number };
  /** Thickness over chord. */
  thickness: number;
}

export interface MovingEdge {
  /** Span fractions between which the surface moves. */
  from: number;
  to: number;
  /** Chord fraction of the hinge line. */
  hinge: number;
}

export interface EngineShape {
  kind: 'propeller' | 'jet';
  /** Centre of the propeller disc or of the exhaust plate. */
  x: number;
  y: number;
  z: number;
  /** Radius of the disc or plate. */
  discRadius: number;
  /** Stations of the nacelle, front first; empty when the engine sits inside the fuselage. */
  nacelle: readonly Station[];
  /** Strut between nacelle and wing or fuselage, a box; null when the nacelle touches. */
  strut: { front: number; back: number; yFrom: number; yTo: number; top: number; bottom: number } | null;
  /** −1 turns counter-clockwise seen from behind. */
  turn: -1 | 1;
}

export interface AirframeShape {
  spanM: number;
  lengthM: number;
  noseX: number;
  tailX: number;
  /** Largest half-width of the fuselage. */
  bodyRadius: number;
  fuselage: readonly Station[];
  /** Length fractions between which the upper facets are windscreen. */
  windscreen: { from: number; to: number };
  wing: Panel;
  aileron: MovingEdge;
  tailplane: Panel;
  fin: Panel;
  rudder: MovingEdge;
  engines: readonly EngineShape[];
  /** Where the arrows start. */
  finCentre: { x: number; z: number };
  rudderCentre: { x: number; z: number };
}
