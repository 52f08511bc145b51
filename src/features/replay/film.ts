/** Balance second by second: which instants the film shows. */
import type {
  BalanceNow,
  BalanceVerdict,
  BalanceWanted,
  DeadSide,
} from '../../components/instruments/balance-verdict.ts';

export interface FilmFrame {
  timeS: number;
  now: BalanceNow;
  wanted: BalanceWanted;
  deadSide: DeadSide;
  verdict: BalanceVerdict;
}

/** Run times of `count` frames one second apart: from the event on, and by whole pages once the cursor is beyond them. */
export function filmTimes(zeroS: number, durationS: number, cursorS: number, count: number): number[] {
  const page = Math.max(0, Math.floor((cursorS - zeroS + 0.5) / count));
  const first = zeroS + page * count;
  const times: number[] = [];
  for (let i = 0; i < count; i += 1) if (first + i <= durationS + 1e-9) times.push(first + i);
  return times.length > 0 ? times : [Math.min(zeroS, durationS)];
}

/** Index of the frame nearest to the cursor. */
export function nearestFrame(times: readonly number[], cursorS: number): number {
  let best = 0;
  times.forEach((time, i) => {
    if (Math.abs(time - cursorS) < Math.abs(times[best] - cursorS)) best = i;
  });
  return best;
}
