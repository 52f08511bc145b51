/** States that a glyph can show, and the word that always goes with it. */
export type GlyphState =
  'met' | 'near' | 'not' | 'not-met' | 'not-reached' | 'running' | 'waiting' | 'lost' | 'balanced' | 'dead' | 'live';

export const STATE_WORDS: Readonly<Record<GlyphState, string>> = {
  met: 'Met',
  near: 'Met, close',
  not: 'Not met',
  'not-met': 'Not met',
  'not-reached': 'Not reached',
  running: 'Running',
  waiting: 'Not flown',
  lost: 'Lost',
  balanced: 'Balanced',
  dead: 'Toward dead side',
  live: 'Toward live side',
};

/** Token that colours the word; neutral states stay ink. */
export const STATE_COLOURS: Readonly<Record<GlyphState, string>> = {
  met: 'var(--met)',
  near: 'var(--near)',
  not: 'var(--not)',
  'not-met': 'var(--not)',
  'not-reached': 'var(--ink-3)',
  running: 'var(--ink)',
  waiting: 'var(--ink)',
  lost: 'var(--ink-3)',
  balanced: 'var(--ink)',
  dead: 'var(--dead)',
  live: 'var(--live)',
};
