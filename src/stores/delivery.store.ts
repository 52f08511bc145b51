import { useEventListener } from '@vueuse/core';
import { defineStore } from 'pinia';
import { computed, ref, shallowReactive, watch } from 'vue';
import type { AttemptResult, StartedAttempt } from '#shared/contracts/attempts.ts';
import type { RecordedChunk } from '#shared/scenario/recording.ts';
import type { EndReason } from '#shared/scenario/run-types.ts';
import { type ChunkSeal, createChunkSeal } from '../runner/record/chunk-seal.ts';
import { type ChunkStore, openChunkStore } from '../runner/record/chunk-store.ts';
import { type Delivery, createDelivery } from '../runner/record/delivery.ts';
import type { DeliveryStatus } from '../runner/record/delivery-types.ts';
import { createFallingBackStore } from '../runner/record/falling-back-store.ts';
import { createFlightClaims } from '../runner/record/flight-claims.ts';
import { createMemoryChunkStore } from '../runner/record/memory-chunk-store.ts';
import { isApiError } from '../services/api-error.ts';
import { getAttempt } from '../services/attempts-api.ts';
import { useConnectionStore } from './connection.store.ts';
import { createDeliveryPorts } from './delivery-ports.ts';
import { useSessionStore } from './session.store.ts';

export interface FlightRecordKeeper {
  keep(chunk: RecordedChunk): void;
  finish(chunkCount: number, ended: EndReason): void;
}

/**
 * Everything recorded here on its way to the server. Lives as long as the page, so that leaving the cockpit loses
 * nothing; after a reload or a new sign-in of the same person it finds what is left and delivers it.
 */
export const useDeliveryStore = defineStore('delivery', () => {
  const session = useSessionStore();
  const connection = useConnectionStore();
  const ports = createDeliveryPorts();
  const claims = createFlightClaims(
    typeof BroadcastChannel === 'undefined' ? null : new BroadcastChannel('sidewash-flights'),
  );
  const statuses = shallowReactive(new Map<string, DeliveryStatus<AttemptResult>>());
  const deliveries = new Map<string, Delivery<AttemptResult>>();
  /** False once the browser has refused to keep recordings. */
  const durable = ref(true);
  let opening: Promise<ChunkStore> | null = null;

  function store(): Promise<ChunkStore> {
    opening ??= openChunkStore().then(
      (kept) => {
        const safe = createFallingBackStore(kept);
        safe.onFallBack((cause) => {
          console.warn('The browser refuses to keep recordings; they stay in memory.', cause);
          durable.value = false;
        });
        return safe;
      },
      (cause: unknown) => {
        console.warn('The browser keeps no recordings; they stay in memory.', cause);
        durable.value = false;
        return createMemoryChunkStore();
      },
    );
    return opening;
  }

  function track(delivery: Delivery<AttemptResult>): void {
    const { attemptId } = delivery.status;
    deliveries.set(attemptId, delivery);
    statuses.set(attemptId, { ...delivery.status });
    delivery.onChange((status) => {
      statuses.set(attemptId, { ...status });
      if (status.state === 'delivered' || status.state === 'gone') {
        claims.release(attemptId);
        deliveries.delete(attemptId);
      }
    });
  }

  /** Begins to keep and deliver a flight that the server has just started. */
  async function begin(started: StartedAttempt, personId: string): Promise<FlightRecordKeeper> {
    const kept = await store();
    const seal: ChunkSeal = createChunkSeal(started.id, started.chunkKey);
    await kept.openAttempt({
      id: started.id,
      personId,
      title: started.scenario.title,
      startedAt: started.startedAt,
      chunkCount: 0,
      ended: null,
    });
    claims.claim(started.id);
    const delivery = createDelivery({ attemptId: started.id, seal, store: kept, ports });
    track(delivery);
    // One chain, so that chunks are kept in order and the end comes after the last of them.
    let chain: Promise<void> = Promise.resolve();
    return {
      keep(chunk) {
        const sealed = seal.close(chunk.index, chunk.hash, chunk.bytes);
        chain = chain
          .then(() => kept.keep({ attemptId: started.id, index: chunk.index, hash: chunk.hash, sealed }))
          .then(() => delivery.offer(chunk.index));
      },
      finish(chunkCount, ended) {
        chain = chain.then(() => kept.end(started.id, ended)).then(() => delivery.finish(chunkCount, ended));
      },
    };
  }

  let recovering: Promise<void> | null = null;
  /** Delivers what an earlier page or session of this person left here. */
  function recover(personId: string): Promise<void> {
    recovering ??= recoverAll(personId).finally(() => {
      recovering = null;
    });
    return recovering;
  }

  async function recoverAll(personId: string): Promise<void> {
    const kept = await store();
    for (const attempt of await kept.attemptsOf(personId)) {
      if (deliveries.has(attempt.id) || (await claims.flownElsewhere(attempt.id))) continue;
      try {
        const known = await getAttempt(attempt.id);
        if (session.me?.person.id !== personId) return;
        if (known.status !== 'flying') {
          await kept.dropAttempt(attempt.id);
          continue;
        }
        const delivery = createDelivery({
          attemptId: attempt.id,
          seal: createChunkSeal(attempt.id, known.chunkKey),
          store: kept,
          ports,
          from: Math.min(known.storedChunks, attempt.chunkCount),
          recorded: attempt.chunkCount,
        });
        track(delivery);
        delivery.finish(attempt.chunkCount, attempt.ended ?? 'left');
      } catch (error) {
        if (isApiError(error, 'not-found') || isApiError(error, 'forbidden')) await kept.dropAttempt(attempt.id);
        else console.warn('An earlier flight waits for the server.', error);
      }
    }
  }

  const personId = computed(() => session.me?.person.id ?? null);
  watch(
    personId,
    (id, before) => {
      if (before && before !== id) {
        // Another person, or nobody: forget the keys. The sealed chunks stay for their owner.
        for (const delivery of deliveries.values()) delivery.stop();
        deliveries.clear();
        statuses.clear();
      }
      if (id) void recover(id);
    },
    { immediate: true },
  );
  const nudgeAll = (): void => {
    for (const delivery of deliveries.values()) delivery.nudge();
    if (personId.value) void recover(personId.value);
  };
  watch(
    () => connection.reachable,
    (reachable) => {
      if (reachable) nudgeAll();
    },
  );
  useEventListener(window, 'online', nudgeAll);

  /** Attempts with something still to send. */
  const waiting = computed(() => [...statuses.values()].filter((s) => s.state !== 'delivered' && s.state !== 'gone'));

  return { statuses, waiting, durable, begin, recover, nudgeAll };
});
