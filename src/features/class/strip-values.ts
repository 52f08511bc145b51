/** What the small balance strip draws, from a line of telemetry. */
import type { Telemetry } from '#shared/contracts/class-socket.ts';
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import { DEG } from '#shared/units/constants.ts';
import type { BalanceNow, BalanceWanted } from '../../components/instruments/balance-verdict.ts';

export const stripNow = (t: Telemetry): BalanceNow & { timeS: number } => ({
  timeS: t.tick / TICK_RATE_HZ,
  betaRad: t.betaDeg * DEG,
  ballWidths: t.ballWidths,
  pedal: t.pedal,
  rudderRad: t.rudderShare,
  rudderMaxRad: 1,
  rudderAvailableRad: 1,
  phiRad: t.phiDeg * DEG,
});
export const stripWanted = (t: Telemetry): BalanceWanted => ({
  found: true,
  betaRad: t.wantedBetaDeg * DEG,
  ballWidths: t.wantedBallWidths,
  pedal: t.wantedPedal,
  phiRad: t.wantedPhiDeg * DEG,
});
