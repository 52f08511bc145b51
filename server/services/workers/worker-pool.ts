import path from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { Worker } from 'node:worker_threads';
import { z } from 'zod';

/** What a worker posts back for each job. */
const replySchema = z.union([
  z.object({ ok: z.literal(true), value: z.unknown() }),
  z.object({ ok: z.literal(false), message: z.string() }),
]);

/** A job that took longer than it was given; its thread was ended. */
export class JobTimeout extends Error {
  override readonly name = 'JobTimeout';
}

interface Job {
  message: unknown;
  withinMs: number | null;
  resolve: (value: unknown) => void;
  reject: (error: Error) => void;
}

interface Thread {
  worker: Worker;
  job: Job | null;
  clock?: NodeJS.Timeout;
}

export interface WorkerPool {
  /** Runs one job in a thread and resolves with what it posted; the caller parses it. */
  run(message: unknown, options?: { withinMs?: number }): Promise<unknown>;
  close(): Promise<void>;
}

/** A table that needs more memory than this ends its thread. */
const SHEET_MEGABYTES = 512;

/** The thread of a worker: from TypeScript beside this file, or bundled beside the server. */
function startThread(name: string): Worker {
  const resourceLimits = name === 'sheet' ? { maxOldGenerationSizeMb: SHEET_MEGABYTES } : undefined;
  const here = fileURLToPath(import.meta.url);
  const folder = path.dirname(here);
  if (!here.endsWith('.ts')) return new Worker(path.join(folder, `${name}.worker.js`), { resourceLimits });
  const file = pathToFileURL(path.join(folder, `${name}.worker.ts`)).href;
  return new Worker(path.join(folder, 'run-from-source.mjs'), { workerData: { file }, execArgv: [], resourceLimits });
}

/**
 * Up to `size` threads of the worker `name`, started when first needed. A thread that dies fails its own job only;
 * the next job gets a new one.
 */
export function createWorkerPool(
  name: 'password' | 'rerun' | 'debrief' | 'sheet' | 'analysis-report' | 'budget',
  size: number,
): WorkerPool {
  const threads = new Set<Thread>();
  const waiting: Job[] = [];
  let closed = false;

  const fail = (thread: Thread, error: Error): void => {
    threads.delete(thread);
    clearTimeout(thread.clock);
    thread.job?.reject(error);
    thread.job = null;
    if (!closed) dispatch();
  };

  const addThread = (): Thread => {
    const thread: Thread = { worker: startThread(name), job: null };
    thread.worker.on('message', (message: unknown) => {
      const { job } = thread;
      thread.job = null;
      clearTimeout(thread.clock);
      thread.worker.unref();
      const reply = replySchema.safeParse(message);
      if (!reply.success) job?.reject(new Error(`Worker ${name} posted something unreadable.`));
      else if (reply.data.ok) job?.resolve(reply.data.value);
      else job?.reject(new Error(`Worker ${name}: ${reply.data.message}`));
      dispatch();
    });
    thread.worker.on('error', (error: unknown) => fail(thread, new Error(`Worker ${name} failed.`, { cause: error })));
    thread.worker.on('exit', () => fail(thread, new Error(`Worker ${name} ended.`)));
    thread.worker.unref();
    threads.add(thread);
    return thread;
  };

  const dispatch = (): void => {
    while (waiting.length > 0) {
      const free = [...threads].find((thread) => thread.job === null) ?? (threads.size < size ? addThread() : null);
      const job = free === null ? undefined : waiting.shift();
      if (free === null || job === undefined) return;
      free.job = job;
      const { withinMs } = job;
      if (withinMs !== null) {
        const late = () => {
          fail(free, new JobTimeout(`Worker ${name} took longer than ${withinMs} ms.`));
          void free.worker.terminate();
        };
        free.clock = setTimeout(late, withinMs);
      }
      free.worker.ref(); // a job keeps the process alive, an idle thread does not
      free.worker.postMessage(job.message);
    }
  };

  return {
    run: (message, { withinMs } = {}) =>
      new Promise((resolve, reject) => {
        if (closed) {
          reject(new Error(`Worker pool ${name} is closed.`));
          return;
        }
        waiting.push({ message, withinMs: withinMs ?? null, resolve, reject });
        dispatch();
      }),
    close: async () => {
      closed = true;
      for (const job of waiting.splice(0)) job.reject(new Error(`Worker pool ${name} is closed.`));
      await Promise.all([...threads].map((thread) => thread.worker.terminate()));
    },
  };
}
