import { useEventListener, useIntervalFn } from '@vueuse/core';
import { defineStore } from 'pinia';
import { ref } from 'vue';
import { fetchHealth } from '../services/health-api.ts';
import { api } from '../services/http-client.ts';

const RETRY_MS = 5000;

/** Whether the server answers. While it does not, it is asked every five seconds. */
export const useConnectionStore = defineStore('connection', () => {
  const reachable = ref(true);
  /** When the connection was lost; ms since 1970, null while it holds. */
  const lostAtMs = ref<number | null>(null);

  function set(now: boolean): void {
    if (now === reachable.value) return;
    reachable.value = now;
    lostAtMs.value = now ? null : Date.now();
    if (now) retry.pause();
    else retry.resume();
  }

  /** The outcome arrives through the client's own report. */
  function check(): Promise<void> {
    return fetchHealth().then(
      () => undefined,
      () => undefined,
    );
  }

  const retry = useIntervalFn(() => void check(), RETRY_MS, { immediate: false });
  api.onReachability(set);
  useEventListener(window, 'offline', () => set(false));
  useEventListener(window, 'online', () => void check());

  return { reachable, lostAtMs, check };
});
