import { parentPort } from 'node:worker_threads';

/** Called once in a worker thread: answers each posted job with what `work` returns or resolves with, or with its error's message. */
export function answerJobs(work: (message: unknown) => unknown): void {
  const port = parentPort;
  if (port === null) throw new Error('This file runs in a worker thread only.');
  const answer = async (message: unknown): Promise<void> => {
    try {
      port.postMessage({ ok: true, value: await work(message) });
    } catch (error) {
      port.postMessage({ ok: false, message: error instanceof Error ? (error.stack ?? error.message) : String(error) });
    }
  };
  port.on('message', (message: unknown) => void answer(message));
}
