/** Order of the ground layers (renderOrder) and the two kinds of material they use. The aeroplane starts at 20. */
import { MeshBasicMaterial } from 'three';
import { LineMaterial } from 'three/examples/jsm/lines/LineMaterial.js';
import type { Rgb } from '../view/palette.ts';

export const LAYER = {
  ground: 0,
  grid: 1,
  runway: 2,
  runwayOutline: 3,
  markings: 4,
  horizon: 5,
  shadow: 6,
  curtain: 7,
  trackLines: 8,
  dropLine: 9,
} as const;

/** Flat colour laid over what was drawn before. */
export function wash(opacity = 1): MeshBasicMaterial {
  return new MeshBasicMaterial({
    transparent: true,
    opacity,
    depthTest: false,
    depthWrite: false,
    toneMapped: false,
    side: 2,
  });
}

/** A line laid over what was drawn before; width in CSS pixels. */
export function layLine(width: number, opacity = 1): LineMaterial {
  return new LineMaterial({
    linewidth: width,
    transparent: true,
    opacity,
    depthTest: false,
    depthWrite: false,
    toneMapped: false,
  });
}

/** Sets a material's screen colour. */
export function ink(material: MeshBasicMaterial | LineMaterial, colour: Rgb): void {
  material.color.setRGB(colour.r, colour.g, colour.b);
}
