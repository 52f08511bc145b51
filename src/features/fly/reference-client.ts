/** The reference pilot's run of the same attempt, computed in a worker so that the cockpit never waits for it. */
import type { ReferenceAnswer, ReferenceQuestion, ReferenceRun } from '../../runner/workers/reference-types.ts';

export interface ReferenceRequest {
  /** Null when it could not be computed; the message says why. */
  readonly answer: Promise<ReferenceRun | null>;
  cancel(): void;
}

export function requestReference(question: Omit<ReferenceQuestion, 'id'>): ReferenceRequest {
  const worker = new Worker(new URL('../../runner/workers/reference.worker.ts', import.meta.url), { type: 'module' });
  let settle: (run: ReferenceRun | null) => void = () => undefined;
  const answer = new Promise<ReferenceRun | null>((resolve) => (settle = resolve));
  worker.addEventListener('message', (event: MessageEvent<ReferenceAnswer>) => {
    const { data } = event;
    if (!data.ok) console.warn('No reference trace:', data.message);
    settle(data.ok ? data.run : null);
    worker.terminate();
  });
  worker.addEventListener('error', (event) => {
    console.warn('No reference trace:', event.message);
    settle(null);
    worker.terminate();
  });
  worker.postMessage({ ...question, id: 1 } satisfies ReferenceQuestion);
  return {
    answer,
    cancel() {
      worker.terminate();
      settle(null);
    },
  };
}
