/** The reference pilot's run on the trace grid. Apart from the worker so that it can be tested without one. */
import { createReferencePilot, flyRun } from '#shared/scenario/reference-pilot.ts';
import { createRun } from '#shared/scenario/run.ts';
import { createRunSampler } from './run-sampler.ts';
import type { ReferenceQuestion, ReferenceRun } from './reference-types.ts';

export function flyReference(question: ReferenceQuestion): ReferenceRun {
  const run = createRun({
    scenario: question.scenario,
    airframe: question.airframe,
    seed: question.seed,
    drawn: question.drawn,
  });
  const sampler = createRunSampler(run, run.durationTicks);
  sampler.take();
  flyRun(run, createReferencePilot(run, question.delayS), Infinity, sampler.take);
  return sampler.finish();
}
