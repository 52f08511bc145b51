/** The page's side of the analysis worker: newest request first, answers of overtaken requests are dropped. */
import type { BenchAnswer, BenchMessage, BenchRequest } from './analysis.worker.ts';
import type { BandPicture, BandRequest } from './bench-control-speed-band.ts';
import type { CrosswindPicture, CrosswindRequest } from './bench-crosswind.ts';
import type { DispersionPortion, DispersionRequest } from './bench-dispersion.ts';
import type { EngineOutPicture, EngineOutRequest } from './bench-engine-out.ts';
import type { MapPicture, MapRequest } from './bench-map.ts';
import type { ModesPicture, ModesRequest } from './bench-modes.ts';

export type PictureOf<R extends BenchRequest> = R extends ModesRequest
  ? ModesPicture
  : R extends MapRequest
    ? MapPicture
    : R extends EngineOutRequest
      ? EngineOutPicture
      : R extends BandRequest
        ? BandPicture
        : R extends CrosswindRequest
          ? CrosswindPicture
          : R extends DispersionRequest
            ? DispersionPortion
            : never;

export class OvertakenError extends Error {
  override readonly name = 'OvertakenError';
}

interface Waiting {
  request: BenchRequest;
  resolve: (picture: unknown) => void;
  reject: (error: Error) => void;
}

/** One worker that computes one request at a time; a newer request takes the place of one that still waits. */
export function createBenchClient(makeWorker: () => Worker) {
  const worker = makeWorker();
  let lastId = 0;
  let running: (Waiting & { id: number }) | null = null;
  let next: Waiting | null = null;

  function start(waiting: Waiting): void {
    lastId += 1;
    running = { ...waiting, id: lastId };
    const message: BenchMessage = { id: lastId, request: waiting.request };
    worker.postMessage(message);
  }
  worker.onmessage = (event: MessageEvent<BenchAnswer>) => {
    const answer = event.data;
    const done = running;
    running = null;
    if (next) {
      const following = next;
      next = null;
      start(following);
    }
    if (!done || done.id !== answer.id) return;
    if (answer.ok) done.resolve(answer.picture);
    else done.reject(new Error(answer.message));
  };
  worker.onerror = (event) => {
    running?.reject(new Error(event.message || 'The analysis worker stopped. Reload the page.'));
    running = null;
  };

  return {
    /** Rejects with `OvertakenError` when a newer request took its place before it began. */
    ask<R extends BenchRequest>(request: R): Promise<PictureOf<R>> {
      return new Promise((resolve, reject) => {
        const waiting: Waiting = { request, resolve: resolve as (picture: unknown) => void, reject }; // the worker answers each kind with its own picture
        if (!running) {
          start(waiting);
          return;
        }
        next?.reject(new OvertakenError('overtaken'));
        next = waiting;
      });
    },
    close(): void {
      worker.terminate();
      next?.reject(new OvertakenError('closed'));
      running?.reject(new OvertakenError('closed'));
    },
  };
}
export type BenchClient = ReturnType<typeof createBenchClient>;

export const startAnalysisWorker = (): Worker =>
  new Worker(new URL('./analysis.worker.ts', import.meta.url), { type: 'module' });
