import { onMounted, onUnmounted, ref, type Ref } from 'vue';

/**
 * Width of an element in CSS pixels, followed through a ResizeObserver.
 * @param fallback width used before the element is measured and where no observer exists
 */
export function useElementWidth(element: Ref<HTMLElement | null>, fallback = 480): { width: Ref<number> } {
  const width = ref(fallback);
  let observer: ResizeObserver | null = null;
  onMounted(() => {
    const target = element.value;
    if (!target || typeof ResizeObserver === 'undefined') return;
    if (target.clientWidth > 0) width.value = target.clientWidth;
    observer = new ResizeObserver((entries) => {
      const measured = entries[0]?.contentRect.width ?? 0;
      if (measured > 0) width.value = Math.round(measured);
    });
    observer.observe(target);
  });
  onUnmounted(() => observer?.disconnect());
  return { width };
}
