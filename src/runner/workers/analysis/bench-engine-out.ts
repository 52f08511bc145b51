/** Figures of the Engine out tab; computed in shared, where printed reports use them too. */
import * as bench from '#shared/analysis/bench-engine-out.ts';

export const engineOutPicture = bench.engineOutPicture;
export type EngineOutRequest = bench.EngineOutRequest;
export type SpeedCurve = bench.SpeedCurve;
export type EngineOutOfSubject = bench.EngineOutOfSubject;
export type EngineOutPicture = bench.EngineOutPicture;
