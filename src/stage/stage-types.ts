/** Names that the stage shares with the screens that use it. */

/** Forces R, F, Y, LL, LR, T, D, W and moments N, L, as the legend tags them. */
export const ARROW_IDS = ['R', 'F', 'Y', 'LL', 'LR', 'T', 'D', 'W', 'N', 'L'] as const;
export type ArrowId = (typeof ARROW_IDS)[number];

export const ARROW_NAMES: Readonly<Record<ArrowId, string>> = {
  R: 'Rudder force',
  F: 'Fin force',
  Y: 'Side force',
  LL: 'Lift, left wing',
  LR: 'Lift, right wing',
  T: 'Thrust',
  D: 'Drag',
  W: 'Weight',
  N: 'Yawing moment',
  L: 'Rolling moment',
};

/** Arrow sets with a question as their name. */
export const ARROW_PRESETS = {
  'what yaws it': ['R', 'F', 'Y', 'T', 'D', 'N'],
  'what rolls it': ['R', 'F', 'LL', 'LR', 'L'],
  everything: ARROW_IDS,
  nothing: [],
} as const satisfies Record<string, readonly ArrowId[]>;

export const CAMERA_NAMES = ['chase', 'nose', 'tower', 'top', 'side'] as const;
export type CameraName = (typeof CAMERA_NAMES)[number];

export type RendererChoice = 'auto' | 'webgl' | 'cpu';
export type ActiveRenderer = 'webgl' | 'cpu';

/** Why the stage draws with the renderer it reports. */
export type RendererReason = 'chosen' | 'hardware' | 'software-webgl' | 'no-webgl' | 'context-lost';

export interface RendererChange {
  renderer: ActiveRenderer;
  reason: RendererReason;
}
