import { cos, PI } from '../numerics/elementary.ts';
import { NumericsError } from '../numerics/errors.ts';

export type InputShape = 'step' | 'pulse' | 'doublet' | 'ramp' | 'one-minus-cosine';

export interface InputSignal {
  shape: InputShape;
  /** Peak; unit of the input. */
  amplitude: number;
  startS: number;
  /** A pulse lasts it, a doublet each way, a ramp and the rise of a one-minus-cosine take it; s; > 0. */
  durationS: number;
}

/**
 * Value of the signal at time t.
 *
 * @param signal  Shape, peak, start and duration.
 * @param t       s.
 * @returns       Unit of the amplitude; 0 before the start.
 * @source        definition of the shapes.
 */
export function signalAt(signal: InputSignal, t: number): number {
  const s = t - signal.startS;
  const { amplitude, durationS } = signal;
  if (s < 0) return 0;
  switch (signal.shape) {
    case 'step':
      return amplitude;
    case 'pulse':
      return s < durationS ? amplitude : 0;
    case 'doublet':
      return s < durationS ? amplitude : s < 2 * durationS ? -amplitude : 0;
    case 'ramp':
      return s < durationS ? (amplitude * s) / durationS : amplitude;
    case 'one-minus-cosine':
      return s < 2 * durationS ? 0.5 * amplitude * (1 - cos((PI * s) / durationS)) : 0;
  }
}

/**
 * Times at which the signal or its slope may jump.
 *
 * @param signal  Shape, peak, start and duration.
 * @returns       s; rising.
 * @source        definition of the shapes.
 */
export function signalEdges(signal: InputSignal): number[] {
  const { startS, durationS } = signal;
  return [startS, startS + durationS, startS + 2 * durationS];
}

/**
 * Passes a signal with finite values and a positive duration, refuses any other.
 *
 * @param signal  What the caller was given.
 * @throws {NumericsError} bad-argument when a value is not finite or the duration not positive.
 * @source        derived here.
 */
export function requireSignal(signal: InputSignal): void {
  const { amplitude, startS, durationS } = signal;
  if (!Number.isFinite(amplitude) || !Number.isFinite(startS) || !(durationS > 0) || !Number.isFinite(durationS)) {
    throw new NumericsError(
      'bad-argument',
      `a ${signal.shape} of ${amplitude} from ${startS} s over ${durationS} s has no meaning`,
    );
  }
}
