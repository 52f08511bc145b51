/** What the analysis worker shares with the page about a condition; computed in shared, where printed reports use it too. */
import * as bench from '#shared/analysis/bench-condition.ts';

export const DERIVATIVE_KEYS = bench.DERIVATIVE_KEYS;
export const prepareSubject = bench.prepareSubject;
export const shiftedAirframe = bench.shiftedAirframe;
export const stallKt = bench.stallKt;
export type DerivativeKey = bench.DerivativeKey;
export type BenchCondition = bench.BenchCondition;
export type BenchSubject = bench.BenchSubject;
export type PreparedSubject = bench.PreparedSubject;
