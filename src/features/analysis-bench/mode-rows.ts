/** What a level asks of each mode, in one line. */
import type { CriterionId, CriterionResult } from '#shared/analysis/criteria-8785c.ts';
import type { Mode } from '#shared/analysis/modes.ts';
import { levelState, levelWords, MODE_NAMES, modeWords, number } from './words.ts';

const ASKED: Readonly<Record<Mode['kind'], readonly { id: CriterionId; name: string; unit: string }[]>> = {
  'dutch-roll': [
    { id: 'dutch-damping', name: 'ζ', unit: '' },
    { id: 'dutch-frequency', name: 'ω', unit: '' },
  ],
  'real-pair': [],
  roll: [{ id: 'roll-mode', name: 'τ', unit: ' s' }],
  spiral: [{ id: 'spiral', name: 'T₂', unit: ' s' }],
  'roll-spiral': [{ id: 'coupled-roll-spiral', name: 'ζω', unit: '' }],
  washout: [],
};

export interface ModeRow {
  name: string;
  value: string;
  asked: string;
  state: ReturnType<typeof levelState>;
  result: string;
}

/** One row a mode, with the worst level of the criteria that judge it. */
export function modeRows(modes: readonly Mode[], criteria: readonly CriterionResult[]): ModeRow[] {
  return modes.map((mode) => {
    const judged = ASKED[mode.kind].flatMap((of) => {
      const found = criteria.find((c) => c.id === of.id);
      return found ? [{ ...of, found }] : [];
    });
    if (mode.kind === 'real-pair') return realPair(mode);
    const levels = judged.map(({ found }) => found.level).filter((level) => typeof level === 'number');
    const level = levels.length > 0 ? (Math.max(...levels) as 1 | 2 | 3 | 4) : null; // the largest of levels
    return {
      name: MODE_NAMES[mode.kind],
      value: modeWords(mode),
      asked:
        judged
          .filter(({ found }) => found.limit !== null)
          .map(
            ({ name, unit, found }) =>
              `${name} ${found.sense === 'at least' ? '≥' : '≤'} ${number(found.limit)}${unit}`,
          )
          .join(', ') || '–',
      state: levelState(level),
      result: mode.kind === 'washout' ? 'of the damper' : levelWords(level),
    };
  });
}

/** One of two real roots in place of the Dutch roll: nothing to judge unless it diverges. */
function realPair(mode: Mode): ModeRow {
  const level = mode.re > 0 ? 4 : null;
  return {
    name: 'Real, for the Dutch roll',
    value: modeWords(mode),
    asked: 'no divergence',
    state: levelState(level),
    result: level === null ? 'converges' : levelWords(level),
  };
}
