/** The balance of one attempt at one instant, taken from its replay. */
import type {
  BalanceNow,
  BalanceVerdict,
  BalanceWanted,
  DeadSide,
} from '../../components/instruments/balance-verdict.ts';

export interface ReplayMoment {
  attemptId: string;
  now: BalanceNow;
  wanted: BalanceWanted;
  deadSide: DeadSide;
  verdict: BalanceVerdict;
  /** Run time of the first event; null when none fired. */
  eventS: number | null;
  /** Seconds from that event (from the start without one) to this instant. */
  sinceS: number;
}
