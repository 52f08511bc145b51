/**
 * Fuselage outlines by class. Drawing proportions only (ours): nothing in the model reads them.
 * Each row: [fraction of the length from the nose, width over the largest width, height over the largest width, rise of the centre over the largest half-width].
 */
import type { ShapeSource } from './shape-types.ts';

export interface BodyProfile {
  rows: readonly (readonly [number, number, number, number])[];
  /** Nose ahead of the mass centre over span. */
  noseOverSpan: number;
  /** Tail end behind the mass centre over the fin arm. */
  tailOverArm: number;
  /** Largest half-width over span. */
  radiusOverSpan: number;
  windscreen: { from: number; to: number };
}

const lightTwin: BodyProfile = {
  rows: [
    [0, 0.05, 0.05, -0.14],
    [0.02, 0.26, 0.26, -0.13],
    [0.06, 0.48, 0.47, -0.11],
    [0.115, 0.68, 0.66, -0.08],
    [0.17, 0.84, 0.86, 0],
    [0.23, 0.94, 1.02, 0.06],
    [0.3, 1, 1.08, 0.08],
    [0.42, 1, 1.06, 0.07],
    [0.52, 0.96, 0.98, 0.06],
    [0.62, 0.82, 0.82, 0.08],
    [0.73, 0.63, 0.63, 0.14],
    [0.84, 0.44, 0.45, 0.22],
    [0.93, 0.29, 0.31, 0.28],
    [1, 0.17, 0.19, 0.32],
  ],
  noseOverSpan: 0.36,
  tailOverArm: 1.17,
  radiusOverSpan: 0.066,
  windscreen: { from: 0.11, to: 0.18 },
};

const single: BodyProfile = {
  rows: [
    [0, 0.42, 0.42, -0.1],
    [0.03, 0.66, 0.6, -0.1],
    [0.1, 0.8, 0.72, -0.08],
    [0.19, 0.86, 0.78, -0.04],
    [0.235, 0.92, 0.9, 0.06],
    [0.3, 0.99, 1.14, 0.26],
    [0.4, 1, 1.18, 0.28],
    [0.5, 0.92, 1.06, 0.26],
    [0.6, 0.76, 0.8, 0.18],
    [0.74, 0.54, 0.56, 0.16],
    [0.88, 0.34, 0.37, 0.2],
    [1, 0.17, 0.2, 0.24],
  ],
  noseOverSpan: 0.22,
  tailOverArm: 1.13,
  radiusOverSpan: 0.055,
  windscreen: { from: 0.2, to: 0.29 },
};

const commuter: BodyProfile = {
  rows: [
    [0, 0.05, 0.05, -0.2],
    [0.018, 0.3, 0.3, -0.18],
    [0.05, 0.54, 0.53, -0.14],
    [0.09, 0.74, 0.73, -0.08],
    [0.13, 0.9, 0.92, 0],
    [0.18, 1, 1.04, 0.03],
    [0.3, 1, 1.05, 0.03],
    [0.5, 1, 1.05, 0.03],
    [0.62, 0.94, 0.98, 0.05],
    [0.72, 0.78, 0.82, 0.14],
    [0.83, 0.55, 0.58, 0.28],
    [0.93, 0.33, 0.36, 0.42],
    [1, 0.16, 0.19, 0.5],
  ],
  noseOverSpan: 0.43,
  tailOverArm: 1.18,
  radiusOverSpan: 0.054,
  windscreen: { from: 0.085, to: 0.135 },
};

const transport: BodyProfile = {
  rows: [
    [0, 0.06, 0.06, -0.16],
    [0.012, 0.32, 0.31, -0.15],
    [0.032, 0.56, 0.55, -0.12],
    [0.06, 0.78, 0.77, -0.06],
    [0.095, 0.94, 0.95, -0.02],
    [0.135, 1, 1.03, 0],
    [0.3, 1, 1.04, 0],
    [0.5, 1, 1.04, 0],
    [0.66, 1, 1.03, 0],
    [0.75, 0.9, 0.94, 0.1],
    [0.84, 0.68, 0.73, 0.28],
    [0.93, 0.38, 0.43, 0.46],
    [1, 0.13, 0.16, 0.58],
  ],
  noseOverSpan: 0.5,
  tailOverArm: 1.2,
  radiusOverSpan: 0.055,
  windscreen: { from: 0.032, to: 0.075 },
};

/** Outline for an airframe: single-engined light aeroplanes, light twins, commuters and transports differ. */
export function bodyProfileFor(source: ShapeSource): BodyProfile {
  const noseEngine = source.engines.some((engine) => engine.kind === 'propeller' && engine.y_m === 0);
  if (noseEngine) return single;
  if (source.class === 'I') return lightTwin;
  const jets = source.engines.some((engine) => engine.kind === 'jet');
  return source.class === 'III' || (jets && source.class !== 'IV') ? transport : commuter;
}
