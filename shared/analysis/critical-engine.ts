import type { Aircraft } from '../model/aircraft.ts';
import { ModelError } from '../model/errors.ts';
import { minimumControlSpeed } from './minimum-control-speed.ts';
import type { ControlSpeed, ControlSpeedRequest, NoControlSpeed } from './minimum-control-speed.ts';

/** Speeds nearer than this fraction are a tie, so that mirrored engines are one. */
const TIE = 1e-7;

export interface CriticalEngine {
  /** Index of the engine. */
  index: number;
  name: string;
  /** Result for each engine, in the order of the data. */
  results: (ControlSpeed | NoControlSpeed)[];
}

/**
 * The engine whose failure gives the highest minimum control speed; ties go to the first listed.
 *
 * An engine whose failure cannot be held at any speed counts as highest, one that needs no control as lowest.
 *
 * @param aircraft  Prepared aircraft with at least one engine.
 * @param request   As for `minimumControlSpeed`, without the failed engines.
 * @returns         The engine with the results for all.
 * @throws {ModelError} unknown-engine when the airframe has no engine, bad-argument, non-finite-input.
 * @sign            none
 * @source          Flight model, engines: computed, never typed in.
 */
export function criticalEngine(aircraft: Aircraft, request: Omit<ControlSpeedRequest, 'failed'>): CriticalEngine {
  if (aircraft.engines.length === 0) throw new ModelError('unknown-engine', 'the airframe has no engine', 'engines');
  const results = aircraft.engines.map((_, i) => minimumControlSpeed(aircraft, { ...request, failed: [i] }));
  let index = 0;
  for (let i = 1; i < results.length; i++) {
    if (severity(results[i]) > severity(results[index]) * (1 + TIE)) index = i;
  }
  return { index, name: aircraft.engines[index].name, results };
}

function severity(result: ControlSpeed | NoControlSpeed): number {
  if (result.found) return result.tasMps;
  return result.reason === 'held-at-no-speed' || result.reason === 'singular-trim' ? Infinity : 0;
}
