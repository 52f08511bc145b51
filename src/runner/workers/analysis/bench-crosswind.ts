/** Figures of the Crosswind tab; computed in shared, where printed reports use them too. */
import * as bench from '#shared/analysis/bench-crosswind.ts';

export const crosswindPicture = bench.crosswindPicture;
export type CrosswindRequest = bench.CrosswindRequest;
export type CrosswindOfSubject = bench.CrosswindOfSubject;
export type CrosswindPicture = bench.CrosswindPicture;
