import type { AirFlow } from './air.ts';

/** Derivative rows of all configurations, one after the other. */
export interface FlatRows {
  CL: number[];
  values: number[];
  slopes: number[];
}

/** What the large-angle equations of one plant work with. */
export interface Work {
  /** Held numbers of the tick and of the engines (tick-held.ts). */
  h: number[];
  e: number[];
  /** Number of engines. */
  n: number;
  rowCL: number[];
  values: number[];
  slopes: number[];
  air: AirFlow;
  /** Quantities of the evaluation, handed from step to step (tick-held.ts). */
  made: number[];
  /** Time since the start of the tick; s. */
  clock: number[];
  /** β, φ, θ, ψ, then sine and cosine of each. */
  angles: number[];
  wind: Float64Array;
  gust: Float64Array;
  /** State at the start of the tick, slopes and states of the Runge–Kutta stages. */
  x: number[];
  k: number[];
  k2: number[];
  k3: number[];
  mid: number[];
  even: number[];
  odd: number[];
}
