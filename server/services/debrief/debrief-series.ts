import { z } from 'zod';
import { createWanted } from '#shared/model/plant.ts';
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import { openRecording, RecordingPlayer } from '#shared/scenario/recording.ts';
import { createReferencePilot, DEFAULT_DELAY_S, flyRun } from '#shared/scenario/reference-pilot.ts';
import { createRun } from '#shared/scenario/run.ts';
import type { Run, RunSpec } from '#shared/scenario/run-types.ts';
import { DEG } from '#shared/units/constants.ts';
import { storedAirframe, storedScenario } from '../attempts/attempt-data.ts';
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
const PEDAL_SHARE = 0.1;
const PEDAL_TICKS = 24;
const CALM_RAD_S = DEG;
const SWUNG_RAD_S = 2 * DEG;
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

function zeroTick(run: Run): number | null {
  return run.fired.find((event) => event.lane !== 'notes')?.tick ?? null;
}

/** First pedal toward the live side (against the yaw without one) and the first calm second, from the first event on. */
function createReaction() {
  let pedalAtZero = 0;
  let started = false;
  let held = 0;
  let calm = 0;
  let swung = false;
  let firstPedalS: number | null = null;
  let arrestedS: number | null = null;
  return {
    see(run: Run, zero: number | null): void {
      if (zero === null || run.tick < zero) return;
      const { now } = run;
      if (!started) {
        started = true;
        pedalAtZero = now.pedal;
      }
      const toward = run.deadSide === 0 ? -Math.sign(now.rRadS) : run.deadSide;
      held = (now.pedal - pedalAtZero) * toward >= PEDAL_SHARE ? held + 1 : 0;
      if (firstPedalS === null && held >= PEDAL_TICKS) firstPedalS = (run.tick - PEDAL_TICKS + 1) / TICK_RATE_HZ;
      const rate = Math.abs(now.rRadS);
      swung ||= rate > SWUNG_RAD_S;
      calm = rate < CALM_RAD_S ? calm + 1 : 0;
      if (swung && arrestedS === null && calm >= TICK_RATE_HZ) arrestedS = (run.tick - TICK_RATE_HZ + 1) / TICK_RATE_HZ;
    },
    result: () => ({ firstPedalS, arrestedS }),
  };
}

function referenceTrace(spec: RunSpec): DebriefTrace | null {
  try {
    const run = createRun(spec);
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
