import path from 'node:path';
import { pathToFileURL } from 'node:url';
import { Worker } from 'node:worker_threads';
import { projectFolder } from '../../../server/bootstrap/paths.mjs';

export interface Threads<Job, Answer> {
  /** Hands the jobs to the first `count` threads, each as soon as it is free; the answers in the order of the jobs. */
  run(jobs: readonly Job[], count: number): Promise<Answer[]>;
  /** One function for each thread: hands it a job when it has none. */
  readonly asks: readonly ((job: Job) => Promise<Answer>)[];
  close(): Promise<unknown>;
}

/** Threads of a file of this folder that answers each message with one (`answerJobs`); they have started when this resolves. */
export async function startThreads<Job, Answer>(name: string, count: number): Promise<Threads<Job, Answer>> {
  const file = pathToFileURL(path.join(projectFolder, 'tests', 'bench', 'threads', `${name}.ts`)).href;
  const entry = path.join(projectFolder, 'server', 'services', 'workers', 'run-from-source.mjs');
  const workers = Array.from({ length: count }, () => new Worker(entry, { workerData: { file }, execArgv: [] }));
  await Promise.all(workers.map((worker) => new Promise((resolve) => worker.once('online', resolve))));

  const ask = (worker: Worker, job: Job): Promise<Answer> =>
    new Promise((resolve, reject) => {
      worker.once('error', reject);
      worker.once('message', (reply: { ok: true; value: Answer } | { ok: false; message: string }) => {
        worker.off('error', reject);
        if (reply.ok) resolve(reply.value);
        else reject(new Error(reply.message));
      });
      worker.postMessage(job);
    });

  return {
    asks: workers.map((worker) => (job: Job) => ask(worker, job)),
    async run(jobs, used) {
      const answers: Answer[] = [];
      let next = 0;
      const work = async (worker: Worker): Promise<void> => {
        while (next < jobs.length) {
          const mine = next++;
          answers[mine] = await ask(worker, jobs[mine]);
        }
      };
      await Promise.all(workers.slice(0, used).map(work));
      return answers;
    },
    close: () => Promise.all(workers.map((worker) => worker.terminate())),
  };
}
