import { onScopeDispose, watch } from 'vue';
import type { TickerLine } from '../../components/instruments/EventTicker.vue';

/** What speaks; a browser without a voice has none. */
export interface Voice {
  speak(text: string): void;
  hush(): void;
}

export function browserVoice(): Voice | null {
  if (typeof speechSynthesis === 'undefined' || typeof SpeechSynthesisUtterance === 'undefined') return null;
  return {
    speak(text) {
      // What happens now matters more than the end of the sentence before it.
      speechSynthesis.cancel();
      const cue = new SpeechSynthesisUtterance(text);
      cue.lang = 'en';
      cue.rate = 1.15;
      speechSynthesis.speak(cue);
    },
    hush: () => speechSynthesis.cancel(),
  };
}

/** Speaks each new line of the ticker and each new message while it is on. */
export function useSpokenCues(setup: {
  on: () => boolean;
  lines: () => readonly TickerLine[];
  messages: () => readonly string[];
  voice?: Voice | null;
}): void {
  const voice = setup.voice === undefined ? browserVoice() : setup.voice;
  if (!voice) return;
  let heard = new Set<string>();
  watch([setup.lines, setup.messages], ([lines, messages]) => {
    const now = new Map([...lines.map(({ id, text }) => [id, text] as const), ...messages.map((m) => [m, m] as const)]);
    const fresh = [...now].filter(([id]) => !heard.has(id)).map(([, text]) => text);
    heard = new Set(now.keys());
    if (setup.on() && fresh.length > 0) voice.speak(fresh.join('. '));
  });
  watch(setup.on, (on) => {
    if (!on) voice.hush();
  });
  onScopeDispose(() => voice.hush());
}
