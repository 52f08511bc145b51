/**
 * Delivers one attempt: chunks in order, each until acknowledged, then the completion, whose answer is the result that
 * counts. Every step can be repeated without harm, so a reload, a second tab or a lost answer count nothing twice.
 */
import type { EndReason } from '#shared/scenario/run-types.ts';
import { backoffMs } from './backoff.ts';
import type { ChunkSeal } from './chunk-seal.ts';
import type { ChunkStore } from './chunk-store.ts';
import type { DeliveryFault, DeliveryPorts, DeliveryStatus } from './delivery-types.ts';

export interface Delivery<Result> {
  readonly status: DeliveryStatus<Result>;
  /** Tells that a chunk has been kept. */
  offer(index: number): void;
  /** Tells that the run is over and how many chunks it has. */
  finish(chunkCount: number, ended: EndReason): void;
  /** Tries again at once: the network is back, or the person has signed in again. */
  nudge(): void;
  stop(): void;
  onChange(callback: (status: DeliveryStatus<Result>) => void): void;
}

export interface DeliverySetup<Result> {
  attemptId: string;
  seal: ChunkSeal;
  store: ChunkStore;
  ports: DeliveryPorts<Result>;
  /** First chunk that the server may lack. */
  from?: number;
  recorded?: number;
}

export function createDelivery<Result>(setup: DeliverySetup<Result>): Delivery<Result> {
  const { attemptId, seal, store, ports } = setup;
  const status: DeliveryStatus<Result> = {
    attemptId,
    state: 'idle',
    acknowledged: setup.from ?? 0,
    recorded: setup.recorded ?? 0,
    retryInS: null,
    refusal: null,
    result: null,
  };
  const listeners: ((status: DeliveryStatus<Result>) => void)[] = [];
  let next = setup.from ?? 0;
  let end: { chunkCount: number; ended: EndReason } | null = null;
  let busy = false;
  let stopped = false;
  let failures = 0;
  let cancelWait: (() => void) | null = null;
  /** Chunks that the server asked for again, sent before the next one. */
  const again: number[] = [];

  const change = (part: Partial<DeliveryStatus<Result>>): void => {
    Object.assign(status, part);
    for (const tell of listeners) tell(status);
  };

  function wait(askedS: number | null): void {
    failures += 1;
    const ms = backoffMs(failures, askedS);
    change({ state: 'waiting', retryInS: Math.round(ms / 1000) });
    cancelWait = ports.later(ms, () => {
      cancelWait = null;
      void work();
    });
  }

  /** The recording ends before this chunk: it cannot be delivered. */
  function cutAt(index: number, detail: string): void {
    end = { chunkCount: index, ended: 'left' };
    next = Math.min(next, index);
    change({ refusal: detail, recorded: index });
  }

  async function deliverChunk(index: number): Promise<void> {
    const kept = await store.chunk(attemptId, index);
    const bytes = kept && seal.open(index, kept.hash, kept.sealed);
    if (!kept || !bytes) {
      cutAt(
        index,
        `Second ${index + 1} of the recording was altered or lost in this browser. The flight counts up to there.`,
      );
      return;
    }
    await ports.putChunk(attemptId, index, bytes, kept.hash);
    failures = 0;
    if (index === next) next += 1;
    change({ acknowledged: Math.max(status.acknowledged, index + 1) });
    await store.dropChunk(attemptId, index);
  }

  async function settle(result: Result | null): Promise<void> {
    await store.dropAttempt(attemptId);
    change({ state: 'delivered', result, retryInS: null });
    stopped = true;
  }

  /** Returns false when the work has to pause. */
  async function handle(fault: DeliveryFault, index: number | null): Promise<boolean> {
    switch (fault.kind) {
      case 'unreachable':
        wait(fault.retryAfterS);
        return false;
      case 'signed-out':
        change({ state: 'signed-out', retryInS: null });
        return false;
      case 'wanted':
        if (index !== null && fault.index < index && (await store.chunk(attemptId, fault.index))) {
          next = fault.index;
        } else if (index !== null && fault.index > index) {
          next = fault.index;
          change({ acknowledged: Math.max(status.acknowledged, fault.index) });
        } else {
          cutAt(
            fault.index,
            `Second ${fault.index + 1} of the recording is missing here and on the server. The flight counts up to there.`,
          );
        }
        return true;
      case 'missing': {
        const kept = new Set(await store.indices(attemptId));
        const lost = fault.indices.filter((i) => !kept.has(i));
        if (lost.length > 0) {
          const first = Math.min(...lost);
          cutAt(
            first,
            `Second ${first + 1} of the recording is missing here and on the server. The flight counts up to there.`,
          );
        } else again.push(...fault.indices);
        return true;
      }
      case 'refused':
        if (index === null) {
          change({ refusal: fault.detail });
          wait(null);
          return false;
        }
        cutAt(
          index,
          `Second ${index + 1} of the recording was refused: ${fault.detail} The flight counts up to there.`,
        );
        return true;
      case 'closed':
        await settle(await ports.result(attemptId).catch(() => null));
        return false;
      case 'gone':
        change({ state: 'gone', refusal: fault.detail, retryInS: null });
        stopped = true;
        return false;
    }
  }

  async function work(): Promise<void> {
    if (busy || stopped || cancelWait) return;
    busy = true;
    let more = true;
    while (more && !stopped) {
      const repeat = again.shift();
      const last = end ? end.chunkCount : status.recorded;
      const index = repeat ?? (next < last ? next : null);
      try {
        if (index !== null) {
          if (status.state !== 'sending') change({ state: 'sending', retryInS: null });
          await deliverChunk(index);
        } else if (end) {
          change({ state: 'sending', retryInS: null });
          const result = await ports.complete(attemptId, end);
          await settle(result);
          more = false;
        } else {
          change({ state: 'idle', retryInS: null });
          more = false;
        }
      } catch (error) {
        more = await handle(ports.faultOf(error), index);
      }
    }
    busy = false;
  }

  return {
    status,
    offer(index) {
      if (end) return;
      change({ recorded: Math.max(status.recorded, index + 1) });
      if (status.state !== 'signed-out') void work();
    },
    finish(chunkCount, ended) {
      if (end) return;
      end = { chunkCount, ended };
      change({ recorded: chunkCount });
      if (status.state !== 'signed-out') void work();
    },
    nudge() {
      cancelWait?.();
      cancelWait = null;
      if (status.state === 'signed-out') change({ state: 'idle' });
      void work();
    },
    stop() {
      stopped = true;
      cancelWait?.();
      cancelWait = null;
    },
    onChange(callback) {
      listeners.push(callback);
    },
  };
}
