import { z } from 'zod';
import { createWanted } from '#shared/model/plant.ts';
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import { openRecording, RecordingPlayer } from '#shared/scenario/recording.ts';
import { createReferencePilot, DEFAULT_DELAY_S, flyRun } from '#shared/scenario/reference-pilot.ts';
import { createRun } from '#shared/scenario/run.ts';
import type { Run, RunSpec } from '#shared/scenario/run-types.ts';
import { DEG } from '#shared/units/constants.ts';
import { storedAirframe, storedScenario } from '../attempts/attempt-data.ts';
import { createReaction, zeroTick } from '../attempts/reaction.ts';
import { rerunJobSchema, type RerunJob } from '../attempts/result-of-run.ts';

export { rerunJobSchema as debriefJobSchema };

const traceSchema = z.object({
  timeS: z.array(z.number()),
  betaDeg: z.array(z.number()),
  phiDeg: z.array(z.number()),
  headingDeg: z.array(z.number()),
  pedalPct: z.array(z.number()),
});
export type DebriefTrace = z.infer<typeof traceSchema>;

const stripFrameSchema = z.object({
  timeS: z.number(),
  /** From the wanted value; degrees, ball widths, percent of pedal. */
  nose: z.number(),
  ball: z.number(),
  pedal: z.number(),
  bankDeg: z.number(),
  /** −1 toward the live side, 0 balanced, 1 toward the dead side. */
  verdict: z.number(),
  deadSide: z.number(),
});
export type StripFrame = z.infer<typeof stripFrameSchema>;

export const debriefSeriesSchema = z.object({
  flown: traceSchema,
  reference: traceSchema.nullable(),
  events: z.array(z.object({ letter: z.string(), text: z.string(), timeS: z.number() })),
  /** Run time of the first event outside the notes; 0 without one. */
  zeroS: z.number(),
  /** Run times; null when never. */
  firstPedalS: z.number().nullable(),
  arrestedS: z.number().nullable(),
  strip: z.array(stripFrameSchema),
  /** Name of what failed, e.g. "left". */
  deadWords: z.string(),
});
export type DebriefSeries = z.infer<typeof debriefSeriesSchema>;

const EVERY_TICKS = 12;
const LETTERS = { engines: 'E', air: 'G', controls: 'C', systems: 'S', notes: 'N' } as const;
/** Gates of the balance convention: sideslip and pedal that count as one unit out of balance. */
const GATE_BETA_DEG = 1.4;
const GATE_PEDAL_PCT = 14;
const STRIP_FRAMES = 6;

const emptyTrace = (): DebriefTrace => ({ timeS: [], betaDeg: [], phiDeg: [], headingDeg: [], pedalPct: [] });

function noteInto(trace: DebriefTrace, run: Run, startPsi: number): void {
  const { now } = run;
  trace.timeS.push(now.timeS);
  trace.betaDeg.push(now.betaRad / DEG);
  trace.phiDeg.push(now.phiRad / DEG);
  trace.headingDeg.push((now.psiRad - startPsi) / DEG);
  trace.pedalPct.push(now.pedal * 100);
}

/** Integrates an attempt again for its printed sheet: traces, the reference pilot's traces, events, reaction, balance. */
export function debriefSeries(job: RerunJob): DebriefSeries {
  const spec: RunSpec = {
    scenario: storedScenario(job.scenario),
    airframe: storedAirframe(job.airframe),
    seed: job.seed,
    drawn: job.drawn,
    branches: job.branches,
  };
  const run = createRun(spec);
  const startPsi = run.now.psiRad;
  const flown = emptyTrace();
  noteInto(flown, run, startPsi);
  const strip = new Map<number, StripFrame>();
  const reaction = createReaction();
  const wanted = createWanted();
  const player = new RecordingPlayer(run, (now) => {
    const kept = Math.floor(now.tick / EVERY_TICKS);
    // After a rewind the branch that counts overwrites what was flown before.
    if (flown.timeS.length > kept) for (const list of Object.values(flown)) list.length = kept;
    const zero = zeroTick(now);
    reaction.see(now, zero);
    if (now.tick % EVERY_TICKS !== 0) return;
    noteInto(flown, now, startPsi);
    if (zero !== null && (now.tick - zero) % TICK_RATE_HZ < EVERY_TICKS && now.tick >= zero) {
      now.wantedInto(wanted);
      const second = Math.round((now.tick - zero) / TICK_RATE_HZ);
      const nose = (now.now.betaRad - wanted.betaRad) / DEG;
      const pedal = (now.now.pedal - wanted.pedal) * 100;
      const side = now.deadSide === 0 ? 1 : now.deadSide;
      const e = 0.5 * side * (nose / GATE_BETA_DEG - pedal / GATE_PEDAL_PCT);
      strip.set(second, {
        timeS: second,
        nose,
        ball: now.now.ballWidths - wanted.ballWidths,
        pedal,
        bankDeg: now.now.phiRad / DEG,
        verdict: e > 1 ? 1 : e < -1 ? -1 : 0,
        deadSide: now.deadSide,
      });
    }
  });
  const chunks = job.chunks.map((chunk) => ({ hash: chunk.hash, bytes: new Uint8Array(chunk.bytes) }));
  for (const content of openRecording(chunks, job.chunkKey, run.plant.engineCount)) player.play(content);
  const zero = zeroTick(run);
  return {
    flown,
    reference: referenceTrace(spec),
    events: run.fired.map((event) => ({ letter: LETTERS[event.lane], text: event.text, timeS: event.timeS })),
    zeroS: (zero ?? 0) / TICK_RATE_HZ,
    ...reaction.result(),
    strip: [...strip.values()].sort((a, b) => a.timeS - b.timeS).slice(0, STRIP_FRAMES),
    deadWords: run.deadSide === 0 ? 'no engine failed' : run.deadSide > 0 ? 'left side dead' : 'right side dead',
  };
}

function referenceTrace(spec: RunSpec): DebriefTrace | null {
  try {
    // The events of the branch that counted: the last one.
    const run = createRun({ ...spec, branches: undefined, injected: spec.branches?.at(-1) });
    const trace = emptyTrace();
    const startPsi = run.now.psiRad;
    noteInto(trace, run, startPsi);
    flyRun(run, createReferencePilot(run, DEFAULT_DELAY_S), Infinity, (now) => {
      if (now.tick % EVERY_TICKS === 0) noteInto(trace, now, startPsi);
    });
    return trace;
  } catch (error) {
    // Data that the reference pilot cannot fly: the sheet is printed without its traces.
    if (error instanceof Error && 'code' in error) return null;
    throw error;
  }
}
