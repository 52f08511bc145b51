import { defineStore } from 'pinia';
import { computed, ref } from 'vue';

export interface Notice {
  id: number;
  text: string;
  /** One action, such as "Undo". */
  action?: { text: string; run: () => void };
}

/** Short notices at the bottom left, one after another. */
export const useNoticesStore = defineStore('notices', () => {
  const waiting = ref<Notice[]>([]);
  const current = computed(() => waiting.value[0] ?? null);
  let lastId = 0;

  function say(text: string, action?: Notice['action']): void {
    if (waiting.value.some((notice) => notice.text === text)) return;
    lastId += 1;
    waiting.value = [...waiting.value, action ? { id: lastId, text, action } : { id: lastId, text }];
  }

  function dismiss(id: number): void {
    waiting.value = waiting.value.filter((notice) => notice.id !== id);
  }

  return { current, say, dismiss };
});
