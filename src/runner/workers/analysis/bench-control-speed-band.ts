/** Uncertainty band of the Engine out tab; computed in shared. */
import * as bench from '#shared/analysis/bench-control-speed-band.ts';

export const bandPicture = bench.bandPicture;
export type BandRequest = bench.BandRequest;
export type BandPicture = bench.BandPicture;
