/** Words for a clock that stands. */
import type { FreezeReason } from '../../runner/flight-session.ts';

export interface FreezeWords {
  title: string;
  detail: string;
}

export const FREEZE_WORDS: Readonly<Record<FreezeReason, FreezeWords>> = {
  pilot: { title: 'Frozen', detail: 'The clock stands. Controls keep their place.' },
  scenario: { title: 'Frozen for a talking point', detail: 'The scenario stops the clock here.' },
  hidden: {
    title: 'Frozen: this page was hidden',
    detail: 'A flight does not go on unseen. Nothing was flown meanwhile.',
  },
  gap: {
    title: 'Frozen: the browser paused this page',
    detail: 'The machine slept or was busy. The time that passed was not flown.',
  },
  slow: {
    title: 'Frozen: this machine cannot keep up',
    detail: 'Close other programs, or choose the plain renderer under Profile and preferences, then go on.',
  },
  device: { title: 'Frozen: a control was unplugged', detail: 'Plug it in again, or go on with keys or pads.' },
};
