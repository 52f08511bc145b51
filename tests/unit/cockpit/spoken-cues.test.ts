import { describe, expect, it } from 'vitest';
import { effectScope, nextTick, ref } from 'vue';
import type { TickerLine } from '../../../src/components/instruments/EventTicker.vue';
import { useSpokenCues } from '../../../src/features/fly/use-spoken-cues.ts';

describe('spoken cues', () => {
  it('speak each new line once, and nothing while they are off', async () => {
    const on = ref(false);
    const lines = ref<TickerLine[]>([]);
    const messages = ref<string[]>([]);
    const spoken: string[] = [];
    let hushed = 0;
    const scope = effectScope();
    scope.run(() =>
      useSpokenCues({
        on: () => on.value,
        lines: () => lines.value,
        messages: () => messages.value,
        voice: { speak: (text) => spoken.push(text), hush: () => (hushed += 1) },
      }),
    );
    const line = (id: string, text: string): TickerLine => ({ id, text, timeS: 0, kind: 'plain' });
    lines.value = [line('a', 'Left engine fails')];
    await nextTick();
    expect(spoken).toEqual([]);
    on.value = true;
    lines.value = [...lines.value, line('b', 'First correct pedal')];
    messages.value = ['Hold the heading'];
    await nextTick();
    expect(spoken).toEqual(['First correct pedal. Hold the heading']);
    lines.value = [...lines.value];
    await nextTick();
    expect(spoken).toHaveLength(1);
    scope.stop();
    expect(hushed).toBe(1);
  });
});
