/** Thread that hashes and compares passwords: bcryptjs would hold up the event loop for a class signing in. */
import { compareSync, hashSync } from 'bcryptjs';
import { z } from 'zod';
import { answerJobs } from './answer-jobs.ts';

const jobSchema = z.union([
  z.object({ kind: z.literal('hash'), password: z.string(), cost: z.number().int().min(4).max(15) }),
  z.object({ kind: z.literal('compare'), password: z.string(), hash: z.string() }),
]);

answerJobs((message) => {
  const job = jobSchema.parse(message);
  return job.kind === 'hash' ? hashSync(job.password, job.cost) : compareSync(job.password, job.hash);
});
