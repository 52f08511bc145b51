import type { EndReason } from '#shared/scenario/run-types.ts';

/** What went wrong with a request, in the words of the delivery; the caller translates its own errors. */
export type DeliveryFault =
  | { kind: 'unreachable'; retryAfterS: number | null }
  | { kind: 'signed-out' }
  /** The server wants this chunk next. */
  | { kind: 'wanted'; index: number }
  /** Completion needs these. */
  | { kind: 'missing'; indices: readonly number[] }
  /** The chunk is not and never will be accepted. */
  | { kind: 'refused'; detail: string }
  /** The attempt is complete already, from another tab or an earlier try. */
  | { kind: 'closed' }
  /** Not this person's, or gone. */
  | { kind: 'gone'; detail: string };

export interface DeliveryPorts<Result> {
  putChunk(attemptId: string, index: number, bytes: Uint8Array<ArrayBuffer>, hash: string): Promise<void>;
  complete(attemptId: string, body: { chunkCount: number; ended: EndReason }): Promise<Result>;
  /** The result of an attempt that is complete already; null when there is none. */
  result(attemptId: string): Promise<Result | null>;
  faultOf(error: unknown): DeliveryFault;
  /** Calls back after a time; returns the way to cancel. */
  later(ms: number, callback: () => void): () => void;
}

export interface DeliveryStatus<Result> {
  attemptId: string;
  state: 'idle' | 'sending' | 'waiting' | 'signed-out' | 'delivered' | 'gone';
  acknowledged: number;
  recorded: number;
  /** Seconds until the next try while waiting. */
  retryInS: number | null;
  /** Words about a chunk that was refused; the attempt keeps the good ones before it. */
  refusal: string | null;
  result: Result | null;
}
