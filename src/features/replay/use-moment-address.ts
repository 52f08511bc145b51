import { useClipboard } from '@vueuse/core';
import { type Ref, onScopeDispose, watch } from 'vue';
import { useRoute, useRouter } from 'vue-router';

/** The moment of a replay in its address: `?t=12.3`, seconds from the start, written when the replay stands. */
export function useMomentAddress(timeS: Readonly<Ref<number>>, playing: Readonly<Ref<boolean>>) {
  const route = useRoute();
  const router = useRouter();
  const { copy } = useClipboard({ legacy: true });

  function askedS(): number | null {
    const asked = Number(route.query['t']);
    return route.query['t'] !== undefined && Number.isFinite(asked) && asked >= 0 ? asked : null;
  }
  const text = (): string => timeS.value.toFixed(1);

  let timer: ReturnType<typeof setTimeout> | undefined;
  watch([timeS, playing], () => {
    clearTimeout(timer);
    if (playing.value) return;
    timer = setTimeout(() => {
      if (route.name !== 'attempt' || timeS.value <= 0.05 || route.query['t'] === text()) return;
      void router.replace({ query: { ...route.query, t: text() }, hash: route.hash });
    }, 400);
  });

  onScopeDispose(() => clearTimeout(timer));

  /** Puts the address of this page at this moment on the clipboard; false when the browser refuses. */
  async function copyAddress(): Promise<boolean> {
    const at = router.resolve({ query: { ...route.query, t: text() } });
    try {
      await copy(new URL(at.href, window.location.origin).href);
      return true;
    } catch {
      return false;
    }
  }

  return { askedS, copy: copyAddress };
}
