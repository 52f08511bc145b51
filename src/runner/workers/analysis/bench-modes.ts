/** Figures of the Modes tab; computed in shared, where printed reports use them too. */
import * as bench from '#shared/analysis/bench-modes.ts';

export const modesPicture = bench.modesPicture;
export type SweepKind = bench.SweepKind;
export type ModesRequest = bench.ModesRequest;
export type ModesOfSubject = bench.ModesOfSubject;
export type ModesPicture = bench.ModesPicture;
