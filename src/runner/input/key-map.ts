/** Which key does what. Physical places (`KeyboardEvent.code`), so that the hand finds them on every layout. */
export const FLIGHT_ACTIONS = [
  'stick-left',
  'stick-right',
  'stick-forward',
  'stick-back',
  'pedal-left',
  'pedal-right',
  'pedal-centre',
  'lever-up',
  'lever-down',
  'feather',
  'trim-left',
  'trim-right',
] as const;
export type FlightAction = (typeof FLIGHT_ACTIONS)[number];

export const KEY_MAP: Readonly<Record<string, FlightAction>> = {
  ArrowLeft: 'stick-left',
  ArrowRight: 'stick-right',
  ArrowUp: 'stick-forward',
  ArrowDown: 'stick-back',
  KeyZ: 'pedal-left',
  KeyX: 'pedal-right',
  Comma: 'pedal-left',
  Period: 'pedal-right',
  KeyC: 'pedal-centre',
  Slash: 'pedal-centre',
  PageUp: 'lever-up',
  PageDown: 'lever-down',
  KeyF: 'feather',
  BracketLeft: 'trim-left',
  BracketRight: 'trim-right',
};

/** Digit keys choose an engine for the lever keys: 1 … 8, and 0 for all. Null for any other key. */
export function engineOfKey(code: string): number | 'all' | null {
  const match = /^(?:Digit|Numpad)([0-8])$/.exec(code);
  if (!match) return null;
  return match[1] === '0' ? 'all' : Number(match[1]) - 1;
}

export interface KeyHelp {
  keys: readonly string[];
  what: string;
  pitchOnly?: boolean;
  leversOnly?: boolean;
}

/** The list shown on screen, in the order of importance. */
export const KEY_HELP: readonly KeyHelp[] = [
  { keys: ['Z', 'X'], what: 'left and right pedal; also , and .' },
  { keys: ['C'], what: 'pedals to the centre; also /' },
  { keys: ['[', ']'], what: 'rudder trim left and right; stays' },
  { keys: ['←', '→'], what: 'stick left and right; springs back' },
  { keys: ['↑', '↓'], what: 'stick forward and back', pitchOnly: true },
  { keys: ['Page Up', 'Page Down'], what: 'power levers', leversOnly: true },
  { keys: ['1', '2', '0'], what: 'which lever: one engine, or 0 for all', leversOnly: true },
  { keys: ['F'], what: 'feather the chosen engine', leversOnly: true },
];
