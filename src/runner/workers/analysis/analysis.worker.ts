/** Runs the bench computations beside the page. One message in, one out; the page decides what is still wanted. */
import { bandPicture, type BandRequest } from './bench-control-speed-band.ts';
import { crosswindPicture, type CrosswindRequest } from './bench-crosswind.ts';
import { dispersionPortion, type DispersionRequest } from './bench-dispersion.ts';
import { engineOutPicture, type EngineOutRequest } from './bench-engine-out.ts';
import { mapPicture, type MapRequest } from './bench-map.ts';
import { modesPicture, type ModesRequest } from './bench-modes.ts';

export type BenchRequest =
  ModesRequest | MapRequest | EngineOutRequest | BandRequest | CrosswindRequest | DispersionRequest;
export interface BenchMessage {
  id: number;
  request: BenchRequest;
}
export type BenchAnswer =
  { id: number; ok: true; picture: unknown; workMs: number } | { id: number; ok: false; message: string };

function compute(request: BenchRequest): unknown {
  switch (request.kind) {
    case 'modes':
      return modesPicture(request);
    case 'map':
      return mapPicture(request);
    case 'engine-out':
      return engineOutPicture(request);
    case 'control-speed-band':
      return bandPicture(request);
    case 'crosswind':
      return crosswindPicture(request);
    case 'dispersion':
      return dispersionPortion(request);
  }
}

self.onmessage = (event: MessageEvent<BenchMessage>) => {
  const { id, request } = event.data;
  const started = performance.now();
  try {
    const answer: BenchAnswer = { id, ok: true, picture: compute(request), workMs: performance.now() - started };
    self.postMessage(answer);
  } catch (error) {
    const answer: BenchAnswer = {
      id,
      ok: false,
      message: error instanceof Error ? error.message : 'The computation failed.',
    };
    self.postMessage(answer);
  }
};
