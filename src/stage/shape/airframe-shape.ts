/** The drawn aeroplane from its data: span, area, chord, fin and engines; class guides the fuselage. */
import { bodyProfileFor } from './body-profiles.ts';
import { shapeEngines } from './engine-shape.ts';
import type { AirframeShape, MovingEdge, Panel, ShapeSource, Station } from './shape-types.ts';

/** Dihedral of the drawing; the model's dihedral effect is Cl_beta, which also holds sweep and wing height. Ours. */
export const DRAWN_DIHEDRAL_RAD = (5.5 * Math.PI) / 180;
/** Leading-edge sweep of the drawing: jets, propeller aeroplanes. Ours. */
const JET_SWEEP_RAD = (28 * Math.PI) / 180;
const PROPELLER_SWEEP_RAD = (2 * Math.PI) / 180;
/** Fin when the data has none: area over wing area, arm over span, height over span. Ours. */
const FIN_DEFAULT = { areaOverWing: 0.11, armOverSpan: 0.44, heightOverSpan: 0.07 };
const FIN_ASPECT_RATIO = 1.5;
const FIN_TAPER = 0.48;
const FIN_SWEEP_RAD = (30 * Math.PI) / 180;
/** Mass centre at this fraction of the mean chord in the drawing. */
const CENTRE_ON_CHORD = 0.27;

/** Taper ratio of the trapezoid with this span, area and mean aerodynamic chord; held within 0.22 … 1. */
export function taperFromMeanChord(spanM: number, areaM2: number, meanChordM: number): number {
  // mean aerodynamic chord over area/span is (4/3)(1 + λ + λ²)/(1 + λ)²; with q = ¾ of it: (1 − q)(1 + λ)² = λ
  const q = (0.75 * meanChordM * spanM) / areaM2;
  const a = 1 - q;
  if (a >= 0.25) return 1;
  if (a <= 0) return 0.22;
  const b = 2 * a - 1;
  const taper = (-b - Math.sqrt(b * b - 4 * a * a)) / (2 * a);
  return Math.min(1, Math.max(0.22, taper));
}

/** Every proportion of the drawn aeroplane. */
export function shapeAirframe(source: ShapeSource): AirframeShape {
  const spanM = source.geometry.wingSpan_m;
  const profile = bodyProfileFor(source);
  const swept = source.engines.some((engine) => engine.kind === 'jet') || source.class === 'IV';
  const bodyRadius = profile.radiusOverSpan * spanM;
  const arm = source.fin?.arm_m ?? FIN_DEFAULT.armOverSpan * spanM;

  const noseX = profile.noseOverSpan * spanM;
  const tailX = -profile.tailOverArm * arm;
  const fuselage = profile.rows.map(([t, width, height, rise]): Station => ({
    x: noseX + (tailX - noseX) * t,
    halfWidth: width * bodyRadius,
    halfHeight: height * bodyRadius,
    z: -rise * bodyRadius,
  }));

  const wing = shapeWing(source, swept, bodyRadius);
  const fin = shapeFin(source, arm, bodyRadius);
  const rudder: MovingEdge = { from: 0, to: 1, hinge: 0.62 };
  const finHeight = source.fin?.height_m ?? FIN_DEFAULT.heightOverSpan * spanM;
  return {
    spanM,
    lengthM: noseX - tailX,
    noseX,
    tailX,
    bodyRadius,
    fuselage,
    windscreen: profile.windscreen,
    wing,
    aileron: { from: 0.6, to: 0.95, hinge: 0.74 },
    tailplane: shapeTailplane(spanM, source.geometry.wingArea_m2, swept, fin),
    fin,
    rudder,
    engines: shapeEngines(source, wing, { noseX, tailX, bodyRadius, fuselage }),
    finCentre: { x: -arm, z: -finHeight },
    rudderCentre: {
      x: mix(fin.root.x - 0.81 * fin.root.chord, fin.tip.x - 0.81 * fin.tip.chord, 0.62),
      z: mix(fin.root.z, fin.tip.z, 0.62),
    },
  };
}

const mix = (a: number, b: number, t: number): number => a + (b - a) * t;

function shapeWing(source: ShapeSource, swept: boolean, bodyRadius: number): Panel {
  const { wingSpan_m: span, wingArea_m2: area, meanChord_m: chord } = source.geometry;
  const taper = taperFromMeanChord(span, area, chord);
  const root = (2 * area) / (span * (1 + taper));
  const sweep = Math.tan(swept ? JET_SWEEP_RAD : PROPELLER_SWEEP_RAD);
  // mean aerodynamic chord of a trapezoid sits at (span/6)(1 + 2λ)/(1 + λ) from the centre line
  const meanY = (span / 6) * ((1 + 2 * taper) / (1 + taper));
  const rootX = CENTRE_ON_CHORD * chord + meanY * sweep;
  const rootZ = 0.42 * bodyRadius;
  return {
    root: { x: rootX, y: 0, z: rootZ, chord: root },
    tip: {
      x: rootX - (span / 2) * sweep,
      y: span / 2,
      z: rootZ - (span / 2) * Math.tan(DRAWN_DIHEDRAL_RAD),
      chord: root * taper,
    },
    thickness: 0.12,
  };
}

function shapeTailplane(span: number, area: number, swept: boolean, fin: Panel): Panel {
  const tailSpan = (swept ? 0.38 : 0.34) * span;
  const tailArea = (swept ? 0.22 : 0.18) * area;
  const taper = swept ? 0.4 : 0.6;
  const root = (2 * tailArea) / (tailSpan * (1 + taper));
  const sweep = Math.tan(swept ? 0.56 : 0.14);
  const x = fin.root.x - fin.root.chord * 0.98 + root * 0.86;
  const z = fin.root.z + 0.18 * fin.root.chord * (swept ? 0.6 : 0.35);
  return {
    root: { x, y: 0, z, chord: root },
    tip: { x: x - (tailSpan / 2) * sweep, y: tailSpan / 2, z: z - (swept ? 0.05 * tailSpan : 0), chord: root * taper },
    thickness: 0.1,
  };
}

/** The fin stands up from the fuselage: y stays 0, z falls from root to tip; its aerodynamic centre lies on arm and height. */
function shapeFin(source: ShapeSource, arm: number, bodyRadius: number): Panel {
  const area = source.fin?.area_m2 ?? FIN_DEFAULT.areaOverWing * source.geometry.wingArea_m2;
  const centreHeight = source.fin?.height_m ?? FIN_DEFAULT.heightOverSpan * source.geometry.wingSpan_m;
  const height = Math.sqrt(FIN_ASPECT_RATIO * area);
  const rootChord = (2 * area) / (height * (1 + FIN_TAPER));
  const tipChord = rootChord * FIN_TAPER;
  const centreOver = (height / 3) * ((1 + 2 * FIN_TAPER) / (1 + FIN_TAPER));
  const sweep = Math.tan(FIN_SWEEP_RAD);
  const meanChord = ((2 / 3) * rootChord * (1 + FIN_TAPER + FIN_TAPER * FIN_TAPER)) / (1 + FIN_TAPER);
  // quarter point of the mean chord at −arm
  const rootX = -arm + 0.25 * meanChord + centreOver * sweep;
  // never let the root float above the tail cone
  const rootZ = Math.max(-(centreHeight - centreOver), -0.2 * bodyRadius);
  return {
    root: { x: rootX, y: 0, z: rootZ, chord: rootChord },
    tip: { x: rootX - height * sweep, y: 0, z: -(centreHeight - centreOver) - height, chord: tipChord },
    thickness: 0.1,
  };
}
