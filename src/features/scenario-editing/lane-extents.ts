/** How long an event goes on, and the shape that is drawn of it behind its label. */
import type { ScenarioEvent } from '#shared/scenario/scenario-schema.ts';

export interface Extent {
  lengthS: number;
  /** A hill rises and falls, a ramp rises and stays, a bar is there throughout, dots go on without a form of their own. */
  shape: 'hill' | 'ramp' | 'bar' | 'dots';
}

/** A change of configuration takes four seconds. */
const CONFIGURATION_S = 4;

/**
 * What is drawn of an event that begins at `timeS`.
 *
 * @param tasMps  Speed by which gradient distances become times: that of the start, so the picture is about right.
 */
export function extentOf(event: ScenarioEvent, timeS: number, durationS: number, tasMps: number): Extent | null {
  switch (event.kind) {
    case 'gust': {
      if (event.shape === 'step') return { lengthS: durationS - timeS, shape: 'bar' };
      const peakS = event.over_s ?? (event.gradientDistance_m ?? 0) / Math.max(1, tasMps);
      return event.shape === 'ramp' ? { lengthS: peakS, shape: 'ramp' } : { lengthS: 2 * peakS, shape: 'hill' };
    }
    case 'turbulence':
      return event.level === 'none' ? null : { lengthS: durationS - timeS, shape: 'dots' };
    case 'lever':
    case 'wind-change':
    case 'rudder-trim':
      return { lengthS: event.over_s, shape: 'ramp' };
    case 'configuration':
      return { lengthS: CONFIGURATION_S, shape: 'ramp' };
    case 'message':
      return { lengthS: event.duration_s, shape: 'bar' };
    case 'input': {
      const lengthS = event.duration_s ?? 0;
      if (event.shape === 'step') return { lengthS: durationS - timeS, shape: 'bar' };
      if (event.shape === 'ramp') return { lengthS, shape: 'ramp' };
      return { lengthS: event.shape === 'doublet' ? 2 * lengthS : lengthS, shape: 'bar' };
    }
    default:
      return null;
  }
}

/** Outline of a shape in a box of 100 × 20, foot at the bottom. */
export const EXTENT_PATHS: Readonly<Record<Extent['shape'], string>> = {
  hill: 'M0 20C25 20 30 2 50 2S75 20 100 20Z',
  ramp: 'M0 20L100 4V20Z',
  bar: 'M0 8H100V20H0Z',
  dots: 'M0 15H100',
};
