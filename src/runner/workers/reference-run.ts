/** The reference pilot's run on the trace grid. Apart from the worker so that it can be tested without one. */
import { createReferencePilot, flyRun } from '#shared/scenario/reference-pilot.ts';
import { createRun } from '#shared/scenario/run.ts';
import type { Run } from '#shared/scenario/run-types.ts';
import { CHANNELS, type ChannelId } from '../channels.ts';
import { GHOST_MEMBERS, type GhostMember, type ReferenceQuestion, type ReferenceRun } from './reference-types.ts';

/** Ticks between samples: 30 samples a second. */
const SAMPLE_TICKS = 4;
const CHANNEL_IDS = Object.keys(CHANNELS) as ChannelId[]; // keys of the table itself

export function flyReference(question: ReferenceQuestion): ReferenceRun {
  const run = createRun({
    scenario: question.scenario,
    airframe: question.airframe,
    seed: question.seed,
    drawn: question.drawn,
  });
  const length = Math.floor(run.durationTicks / SAMPLE_TICKS) + 1;
  const columns = Object.fromEntries(
    CHANNEL_IDS.map((id) => [id, new Float32Array(length)]),
  ) as ReferenceRun['columns']; // one entry for each id
  const ghost = Object.fromEntries(GHOST_MEMBERS.map((id) => [id, new Float64Array(length)])) as Record<
    GhostMember,
    Float64Array
  >; // one entry for each member
  const startPsi = run.now.psiRad;
  let samples = 0;
  const take = (seen: Run): void => {
    const at = seen.tick / SAMPLE_TICKS;
    if (!Number.isInteger(at) || at >= length) return;
    for (const id of CHANNEL_IDS) columns[id][at] = CHANNELS[id].read(seen.now, startPsi);
    for (const member of GHOST_MEMBERS) ghost[member][at] = seen.now[member];
    samples = at + 1;
  };
  take(run);
  flyRun(run, createReferencePilot(run, question.delayS), Infinity, take);
  for (const id of CHANNEL_IDS) columns[id] = columns[id].slice(0, samples);
  return { samples, durationS: run.timeS, ended: run.ended, passed: run.passed(), columns, ghost };
}
