/** The lines of the board: who, in which state, in words; sorted, and counted. */
import { computed, type Ref } from 'vue';
import { verdictWord } from '../../components/instruments/balance-verdict.ts';
import type { GlyphState } from '../../components/state-words.ts';
import type { BoardLine, LiveClass } from './use-class.ts';

/** Telemetry older than this counts as lost. */
const LOST_MS = 2500;
/** Hands and feet still this long after a failure are no input. */
const STILL_S = 2.5;
export type Word = 'balanced' | 'dead' | 'live' | 'still' | 'lost' | 'over' | 'waiting';
export interface Line {
  id: string;
  seat: number;
  name: string;
  line: BoardLine | null;
  word: Word;
  text: string;
  glyph: GlyphState;
}
export const GLYPHS: Readonly<Record<Word, GlyphState>> = {
  balanced: 'balanced',
  dead: 'dead',
  live: 'live',
  still: 'not-met',
  lost: 'lost',
  over: 'waiting',
  waiting: 'waiting',
};
const NEED: readonly Word[] = ['still', 'dead', 'live', 'lost', 'waiting', 'over', 'balanced'];

export type BoardSort = 'seat' | 'need' | 'slip' | 'pedal';
const peak = ({ line }: Line): number => line?.row.telemetry.peakBetaDeg ?? -1;
/** Who has not found the pedal comes first. */
const pedal = ({ line }: Line): number => line?.row.telemetry.firstPedalS ?? Number.MAX_VALUE;
const ORDERS: Readonly<Record<BoardSort, (a: Line, b: Line) => number>> = {
  seat: (a, b) => a.seat - b.seat,
  need: (a, b) => NEED.indexOf(a.word) - NEED.indexOf(b.word),
  slip: (a, b) => peak(b) - peak(a),
  pedal: (a, b) => pedal(b) - pedal(a),
};

export function useBoard(live: LiveClass, sort: Readonly<Ref<BoardSort>>) {
  const { state, board, present, serverMs } = live;
  function wordOf(id: string, line: BoardLine | null): { word: Word; text: string } {
    const age = line ? serverMs.value - line.atMs : 0;
    if (!line)
      return present.value.has(id) ? { word: 'waiting', text: 'No flight yet' } : { word: 'lost', text: 'Not here' };
    const { telemetry } = line.row;
    if (telemetry.ended !== null)
      return { word: 'over', text: telemetry.ended === 'ground' ? 'Hit the ground' : 'Ended' };
    if (age > LOST_MS && live.phase.value === 'running')
      return { word: 'lost', text: `Lost ${Math.round(age / 1000)} s` };
    const side = telemetry.phiDeg < 0 ? 'L' : 'R';
    if (telemetry.deadSide !== 0 && telemetry.stillS > STILL_S && telemetry.verdict !== 'balanced')
      return { word: 'still', text: `No input, bank ${Math.abs(telemetry.phiDeg).toFixed(0)}° ${side}` };
    return { word: telemetry.verdict, text: verdictWord(telemetry.verdict, telemetry.deadSide) };
  }
  const lines = computed<Line[]>(() => {
    const members = state.value.members.filter(({ role, standing }) => role !== 'instructor' && standing === 'in');
    const out = members.map(({ id, seat, name }) => {
      const line = board.value.get(id) ?? null;
      const { word, text } = wordOf(id, line);
      return {
        id,
        seat,
        name: state.value.options.namesHidden ? `Seat ${seat}` : name,
        line,
        word,
        text,
        glyph: GLYPHS[word],
      };
    });
    return out.sort((a, b) => ORDERS[sort.value](a, b) || a.seat - b.seat);
  });
  const counts = computed(() => {
    const of = (word: Word): number => lines.value.filter((line) => line.word === word).length;
    return [
      { word: 'balanced' as const, n: of('balanced'), text: 'balanced' },
      { word: 'dead' as const, n: of('dead') + of('still'), text: 'toward dead side' },
      { word: 'live' as const, n: of('live'), text: 'toward live side' },
      { word: 'lost' as const, n: of('lost'), text: 'lost' },
    ];
  });
  return { lines, counts };
}
