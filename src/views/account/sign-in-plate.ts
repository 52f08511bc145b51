import type { PlateSpec } from '../../components/plate/plate-scene.ts';

/**
 * The plate of the sign-in page: left engine out, right pedal in, 3° of bank toward the live engine, no sideslip.
 * Invented proportions of a light twin.
 */
const twin: PlateSpec['shape'] = {
  spanM: 11.3,
  chordM: 1.6,
  finArmM: 4.7,
  finHeightM: 0.9,
  rudderDeg: 18,
  engines: [
    { kind: 'propeller', yM: -1.75 },
    { kind: 'propeller', yM: 1.75 },
  ],
};

const common = {
  shape: twin,
  failed: [0],
  attitude: { headingDeg: 0, pitchDeg: 6, bankDeg: 3 },
  pathRightDeg: 0,
  pathUpDeg: -5,
  runway: { offsetM: 8, widthM: 30 },
} satisfies Partial<PlateSpec>;

export const LARGE_PLATE: PlateSpec = {
  ...common,
  width: 896,
  height: 762,
  sightDeg: 36,
  aboveDeg: 16,
  distanceSpans: 1.3,
  focal: 1010,
  heightM: 13,
  place: [0.5, 0.54],
};

export const MEDIUM_PLATE: PlateSpec = {
  ...LARGE_PLATE,
  width: 548,
  height: 600,
  focal: 640,
  place: [0.5, 0.5],
};

export const SMALL_PLATE: PlateSpec = {
  ...common,
  width: 342,
  height: 184,
  sightDeg: 30,
  aboveDeg: 15,
  distanceSpans: 1.4,
  focal: 300,
  heightM: 13,
  place: [0.48, 0.62],
};
