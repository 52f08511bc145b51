/** The clock of a class: which tick is flown at a time of the server. Segments come from the log (class-log.ts). */
import { TICK_RATE_HZ } from '../model/plant-types.ts';

export interface ClockSegment {
  /** Server's time from which it holds, ms. */
  fromMs: number;
  /** Tick at that time. */
  tick: number;
  /** Run seconds in a second; 0 frozen. */
  rate: number;
}

/** A tick may come out one too low from the division below; this is far less than a tick and far more than rounding. */
const ROUNDING = 1e-6;

/** The tick at which a segment stands at a time: its first one before it begins. */
export function segmentTick(segment: ClockSegment, serverMs: number): number {
  if (serverMs <= segment.fromMs || segment.rate === 0) return segment.tick;
  const gone = ((serverMs - segment.fromMs) * segment.rate * TICK_RATE_HZ) / 1000;
  return segment.tick + Math.floor(gone + ROUNDING);
}

/** The same with its fraction of a tick, for a picture that moves between ticks. */
export function segmentTickExactly(segment: ClockSegment, serverMs: number): number {
  if (serverMs <= segment.fromMs || segment.rate === 0) return segment.tick;
  return segment.tick + ((serverMs - segment.fromMs) * segment.rate * TICK_RATE_HZ) / 1000;
}

/**
 * The segment that holds at a time. One that begins in the future does not hold yet; the first one always does.
 *
 * @param segments  Segments in the order of the log, at least one.
 */
export function segmentAt(segments: readonly ClockSegment[], serverMs: number): ClockSegment {
  for (let i = segments.length - 1; i > 0; i -= 1) if (segments[i].fromMs <= serverMs) return segments[i];
  return segments[0];
}

/** The tick of the class clock at a time, not beyond `lastTick`. */
export function clockTick(segments: readonly ClockSegment[], serverMs: number, lastTick: number): number {
  return Math.min(lastTick, segmentTick(segmentAt(segments, serverMs), serverMs));
}

/** Server's time at which a segment reaches a tick; infinite when it never does. */
export function msOfTick(segment: ClockSegment, tick: number): number {
  if (tick <= segment.tick) return segment.fromMs;
  return segment.rate === 0
    ? Number.POSITIVE_INFINITY
    : segment.fromMs + ((tick - segment.tick) * 1000) / (TICK_RATE_HZ * segment.rate);
}

/** One answer of the server to the question for its time. */
export interface ClockAnswer {
  askedMs: number;
  serverMs: number;
  answeredMs: number;
}

/** How far the server's clock is ahead of this one, wrong by at most half of the round trip; ms. */
export interface ClockOffset {
  offsetMs: number;
  roundTripMs: number;
}

/**
 * How far the server's clock is ahead of this one, ms: from the answers that came back fastest, because those are the
 * least delayed one way. Wrong by at most half of the fastest round trip.
 *
 * @param answers  Recent answers, at least one.
 */
export function clockOffset(answers: readonly ClockAnswer[]): ClockOffset {
  let best = answers[0];
  for (const answer of answers) {
    if (answer.answeredMs - answer.askedMs < best.answeredMs - best.askedMs) best = answer;
  }
  const roundTripMs = best.answeredMs - best.askedMs;
  return { offsetMs: best.serverMs - (best.askedMs + roundTripMs / 2), roundTripMs };
}

/** A message of the server may be so late beyond the round trip, ms, before the clock is doubted. */
const LATE_MS = 250;
const COARSE_MS = 20;

/**
 * Which of two measurements to go on with: the sharper one while they agree, else the newer, for one of the clocks stood still or was set.
 *
 * @param before  What was known; an infinite round trip: nothing.
 * @param next    The new measurement.
 */
export function betterOffset(before: ClockOffset, next: ClockOffset): ClockOffset {
  const agree = Math.abs(before.offsetMs - next.offsetMs) <= (before.roundTripMs + next.roundTripMs) / 2 + COARSE_MS;
  return agree && before.roundTripMs < next.roundTripMs ? before : next;
}

/**
 * True when a time that the server has told just now does not fit what is known of its clock: it lies in the future, or
 * farther in the past than a message takes.
 *
 * @param known     What is known of the server's clock.
 * @param serverMs  Time in the message, of the server.
 * @param nowMs     This clock as the message arrives.
 */
export function contradicts(known: ClockOffset, serverMs: number, nowMs: number): boolean {
  const lateMs = nowMs + known.offsetMs - serverMs;
  return lateMs < -(known.roundTripMs / 2 + COARSE_MS) || lateMs > known.roundTripMs + LATE_MS;
}
