import { describe, expect, it } from 'vitest';
import type { EndReason } from '#shared/scenario/run-types.ts';
import { backoffMs } from '../../../src/runner/record/backoff.ts';
import { createChunkSeal } from '../../../src/runner/record/chunk-seal.ts';
import type { ChunkStore } from '../../../src/runner/record/chunk-store.ts';
import { createDelivery } from '../../../src/runner/record/delivery.ts';
import type { DeliveryFault, DeliveryPorts } from '../../../src/runner/record/delivery-types.ts';
import { createFallingBackStore } from '../../../src/runner/record/falling-back-store.ts';
import { createFlightClaims } from '../../../src/runner/record/flight-claims.ts';
import { createMemoryChunkStore } from '../../../src/runner/record/memory-chunk-store.ts';

const ID = '6f1c2b3a-0000-4000-8000-000000000001';
const KEY = '0123456789abcdef';
const bytesOf = (i: number): Uint8Array<ArrayBuffer> => new Uint8Array([i, i + 1, i + 2]);
const settle = () => new Promise((resolve) => setTimeout(resolve, 5));

class Fault extends Error {
  constructor(readonly fault: DeliveryFault) {
    super(fault.kind);
  }
}

/** A server that keeps chunks, refuses gaps, and can be told to fail. */
function fakeServer() {
  const chunks = new Map<number, string>();
  const puts: number[] = [];
  const fail: DeliveryFault[] = [];
  let completions = 0;
  const timers: (() => void)[] = [];
  const ports: DeliveryPorts<string> = {
    putChunk(_id, index, bytes) {
      puts.push(index);
      const next = fail.shift();
      if (next) return Promise.reject(new Fault(next));
      if (index > chunks.size) return Promise.reject(new Fault({ kind: 'wanted', index: chunks.size }));
      chunks.set(index, [...bytes].join());
      return Promise.resolve();
    },
    complete(_id, body: { chunkCount: number; ended: EndReason }) {
      const next = fail.shift();
      if (next) return Promise.reject(new Fault(next));
      completions += 1;
      return Promise.resolve(`${body.ended}/${body.chunkCount}`);
    },
    result: () => Promise.resolve('earlier'),
    faultOf: (error) => (error instanceof Fault ? error.fault : { kind: 'unreachable', retryAfterS: null }),
    later(_ms, callback) {
      timers.push(callback);
      return () => timers.splice(timers.indexOf(callback), 1);
    },
  };
  return {
    chunks,
    puts,
    fail,
    ports,
    timers,
    get completions() {
      return completions;
    },
  };
}

async function recorded(count: number, store: ChunkStore = createMemoryChunkStore()) {
  const seal = createChunkSeal(ID, KEY);
  await store.openAttempt({ id: ID, personId: 'p', title: 't', startedAt: '', chunkCount: 0, ended: null });
  for (let i = 0; i < count; i += 1) {
    await store.keep({ attemptId: ID, index: i, hash: `h${i}`, sealed: seal.close(i, `h${i}`, bytesOf(i)) });
  }
  return { store, seal };
}

describe('delivery', () => {
  it('sends chunks in order, completes once and keeps nothing', async () => {
    const server = fakeServer();
    const { store, seal } = await recorded(3);
    const delivery = createDelivery({ attemptId: ID, seal, store, ports: server.ports });
    for (let i = 0; i < 3; i += 1) delivery.offer(i);
    delivery.finish(3, 'completed');
    delivery.finish(3, 'completed');
    await settle();
    expect(server.puts).toEqual([0, 1, 2]);
    expect(server.chunks.get(2)).toBe('2,3,4');
    expect(server.completions).toBe(1);
    expect(delivery.status).toMatchObject({ state: 'delivered', result: 'completed/3', acknowledged: 3 });
    expect(await store.indices(ID)).toEqual([]);
    expect(await store.attempt(ID)).toBeNull();
  });

  it('waits while the server cannot be reached and goes on where it stopped', async () => {
    const server = fakeServer();
    const { store, seal } = await recorded(2);
    server.fail.push({ kind: 'unreachable', retryAfterS: null }, { kind: 'unreachable', retryAfterS: 7 });
    const delivery = createDelivery({ attemptId: ID, seal, store, ports: server.ports });
    delivery.offer(0);
    delivery.offer(1);
    await settle();
    expect(delivery.status).toMatchObject({ state: 'waiting', acknowledged: 0, recorded: 2, retryInS: 1 });
    server.timers.shift()?.();
    await settle();
    expect(delivery.status.retryInS).toBe(7);
    delivery.nudge();
    await settle();
    expect(server.chunks.size).toBe(2);
    expect(server.timers.length).toBe(0);
  });

  it('stops when the session ends and resumes after sign-in', async () => {
    const server = fakeServer();
    const { store, seal } = await recorded(1);
    server.fail.push({ kind: 'signed-out' });
    const delivery = createDelivery({ attemptId: ID, seal, store, ports: server.ports });
    delivery.offer(0);
    await settle();
    expect(delivery.status.state).toBe('signed-out');
    delivery.finish(1, 'completed');
    await settle();
    expect(server.chunks.size).toBe(0);
    delivery.nudge();
    await settle();
    expect(delivery.status.state).toBe('delivered');
  });

  it('a lost acknowledgement is repeated and counted once', async () => {
    const server = fakeServer();
    const { store, seal } = await recorded(2);
    server.chunks.set(0, '0,1,2'); // arrived earlier, the answer was lost
    const delivery = createDelivery({ attemptId: ID, seal, store, ports: server.ports });
    delivery.offer(0);
    delivery.offer(1);
    await settle();
    expect(server.chunks.size).toBe(2);
    expect(delivery.status.acknowledged).toBe(2);
  });

  it('skips ahead when the server has more than this tab knows', async () => {
    const server = fakeServer();
    const { store, seal } = await recorded(3);
    await store.dropChunk(ID, 0);
    server.chunks.set(0, 'x');
    const delivery = createDelivery({ attemptId: ID, seal, store, ports: server.ports, from: 1, recorded: 3 });
    delivery.finish(3, 'completed');
    await settle();
    expect(server.puts).toEqual([1, 2]);
    expect(delivery.status.state).toBe('delivered');
  });

  it('an altered chunk does not open: the good ones before it count', async () => {
    const server = fakeServer();
    const { store, seal } = await recorded(3);
    const kept = await store.chunk(ID, 1);
    if (!kept) throw new Error('chunk 1 is missing');
    kept.sealed[30] ^= 1;
    const delivery = createDelivery({ attemptId: ID, seal, store, ports: server.ports });
    for (let i = 0; i < 3; i += 1) delivery.offer(i);
    delivery.finish(3, 'completed');
    await settle();
    expect([...server.chunks.keys()]).toEqual([0]);
    expect(delivery.status).toMatchObject({ state: 'delivered', result: 'left/1' });
    expect(delivery.status.refusal).toContain('Second 2');
  });

  it('a chunk that the server refuses ends the recording before it', async () => {
    const server = fakeServer();
    const { store, seal } = await recorded(2);
    const delivery = createDelivery({ attemptId: ID, seal, store, ports: server.ports });
    delivery.offer(0);
    await settle();
    server.fail.push({ kind: 'refused', detail: 'its hash does not follow the chain.' });
    delivery.offer(1);
    delivery.finish(2, 'completed');
    await settle();
    expect(delivery.status.result).toBe('left/1');
  });

  it('sends again what completion finds missing', async () => {
    const server = fakeServer();
    const { store, seal } = await recorded(2);
    server.chunks.set(0, 'x');
    const delivery = createDelivery({ attemptId: ID, seal, store, ports: server.ports, from: 2, recorded: 2 });
    server.fail.push({ kind: 'missing', indices: [1] });
    delivery.finish(2, 'completed');
    await settle();
    expect(server.puts).toEqual([1]);
    expect(delivery.status.result).toBe('completed/2');
  });

  it('takes the result of an attempt that another tab has completed', async () => {
    const server = fakeServer();
    const { store, seal } = await recorded(1);
    server.fail.push({ kind: 'closed' });
    const delivery = createDelivery({ attemptId: ID, seal, store, ports: server.ports });
    delivery.offer(0);
    await settle();
    expect(delivery.status).toMatchObject({ state: 'delivered', result: 'earlier' });
    expect(await store.attempt(ID)).toBeNull();
  });

  it('waits longer each time, never beyond half a minute, unless asked to', () => {
    expect([1, 2, 3, 6, 20].map((n) => backoffMs(n))).toEqual([1000, 2000, 4000, 30_000, 30_000]);
    expect(backoffMs(1, 40)).toBe(40_000);
  });
});

describe('sealed chunks', () => {
  it('open only in their own place, for their own attempt and key', () => {
    const seal = createChunkSeal(ID, KEY);
    const sealed = seal.close(4, 'aa', bytesOf(9));
    expect([...(seal.open(4, 'aa', sealed) ?? [])]).toEqual([9, 10, 11]);
    expect(seal.open(5, 'aa', sealed)).toBeNull();
    expect(seal.open(4, 'ab', sealed)).toBeNull();
    expect(createChunkSeal(ID, 'fedcba9876543210').open(4, 'aa', sealed)).toBeNull();
    expect(createChunkSeal(ID.replace('1', '2'), KEY).open(4, 'aa', sealed)).toBeNull();
    expect(seal.open(4, 'aa', new Uint8Array(3))).toBeNull();
  });
  it('never repeat a sealed text', () => {
    const seal = createChunkSeal(ID, KEY);
    expect([...seal.close(0, 'a', bytesOf(1))]).not.toEqual([...seal.close(0, 'a', bytesOf(1))]);
  });
});

describe('storage that fails in flight', () => {
  it('goes on in memory, says so once and loses nothing', async () => {
    const inner = createMemoryChunkStore();
    let full = false;
    const flaky: ChunkStore = {
      ...inner,
      durable: true,
      keep: (chunk) => (full ? Promise.reject(new Error('quota')) : inner.keep(chunk)),
    };
    const store = createFallingBackStore(flaky);
    let told = 0;
    store.onFallBack(() => (told += 1));
    const { seal } = await recorded(1, store);
    full = true;
    for (const i of [1, 2]) {
      await store.keep({ attemptId: ID, index: i, hash: `h${i}`, sealed: seal.close(i, `h${i}`, bytesOf(i)) });
    }
    expect(told).toBe(1);
    expect(store.durable).toBe(false);
    expect(await store.indices(ID)).toEqual([0, 1, 2]);
    const server = fakeServer();
    const delivery = createDelivery({ attemptId: ID, seal, store, ports: server.ports });
    delivery.finish(3, 'completed');
    await settle();
    expect(server.chunks.size).toBe(3);
  });
});

describe('flights in other tabs', () => {
  const pair = () => {
    const listeners: ((event: { data: unknown }) => void)[] = [];
    return () => {
      let own: ((event: { data: unknown }) => void) | null = null;
      return {
        postMessage: (message: unknown) => listeners.filter((l) => l !== own).forEach((l) => l({ data: message })),
        addEventListener: (_: 'message', listener: (event: { data: unknown }) => void) => {
          own = listener;
          listeners.push(listener);
        },
        close: () => undefined,
      };
    };
  };
  it('are found by asking, and not once released', async () => {
    const channel = pair();
    const now = () => Promise.resolve();
    const one = createFlightClaims(channel(), now);
    const two = createFlightClaims(channel(), now);
    one.claim(ID);
    expect(await two.flownElsewhere(ID)).toBe(true);
    one.release(ID);
    expect(await two.flownElsewhere(ID)).toBe(false);
  });
});
