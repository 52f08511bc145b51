/** What the board is told of one's own flight, ten times a second. */
import type { Telemetry } from '#shared/contracts/class-socket.ts';
import { TICK_RATE_HZ, type WantedValues } from '#shared/model/plant-types.ts';
import type { Run } from '#shared/scenario/run-types.ts';
import { DEG, FT, KT } from '#shared/units/constants.ts';
import { createVerdictTracker } from '../../components/instruments/balance-verdict.ts';
import { createReactionTracker } from '../../runner/reaction-marks.ts';
import { zeroEvent } from '../fly/flight-log.ts';

export const TELEMETRY_TICKS = TICK_RATE_HZ / 10;
/** A movement smaller than this share of travel is none. */
const STILL = 0.01;

export interface TelemetryMaker {
  /** After every tick; the telemetry every tenth of a second, else null. */
  tick(run: Run): Telemetry | null;
  reset(): void;
}

export function createTelemetry(): TelemetryMaker {
  const verdict = createVerdictTracker();
  let reactions = createReactionTracker();
  let peakBeta = 0;
  let lastTick = 0;
  let startPsi: number | null = null;
  let still = { pedal: 0, stick: 0, sinceS: 0 };
  const wanted: WantedValues = {
    found: false,
    betaRad: 0,
    phiRad: 0,
    pedal: 0,
    stick: 0,
    aileronRad: 0,
    rudderRad: 0,
    ballWidths: 0,
  };
  const maker: TelemetryMaker = {
    reset() {
      verdict.reset();
      reactions = createReactionTracker();
      peakBeta = 0;
      startPsi = null;
      still = { pedal: 0, stick: 0, sinceS: 0 };
    },
    tick(run) {
      if (run.tick < lastTick) maker.reset();
      lastTick = run.tick;
      const { now, deadSide } = run;
      startPsi ??= now.psiRad;
      const first = zeroEvent(run.fired);
      if (reactions.marks.eventTick === null) {
        if (first) reactions.begin(now, first.tick);
      } else reactions.see(now, deadSide);
      if (first) peakBeta = Math.max(peakBeta, Math.abs(now.betaRad));
      if (Math.abs(now.pedal - still.pedal) > STILL || Math.abs(now.stick - still.stick) > STILL)
        still = { pedal: now.pedal, stick: now.stick, sinceS: run.timeS };
      if (run.tick % TELEMETRY_TICKS !== 0 && run.ended === null) return null;
      run.wantedInto(wanted);
      const { firstCorrectPedalTick, eventTick } = reactions.marks;
      return {
        tick: run.tick,
        ended: run.ended,
        betaDeg: bounded(now.betaRad / DEG, 180),
        wantedBetaDeg: bounded(wanted.betaRad / DEG, 180),
        ballWidths: bounded(now.ballWidths, 10),
        wantedBallWidths: bounded(wanted.ballWidths, 10),
        pedal: bounded(now.pedal, 10),
        wantedPedal: bounded(wanted.pedal, 10),
        rudderShare: bounded(now.rudderRad / now.rudderMaxRad, 10),
        phiDeg: bounded(now.phiRad / DEG, 720),
        wantedPhiDeg: bounded(wanted.phiRad / DEG, 720),
        headingDeviationDeg: bounded((now.psiRad - startPsi) / DEG, 10_000),
        iasKt: bounded(now.casMps / KT, 2000),
        heightFt: bounded(now.heightAboveRunwayM / FT, 200_000),
        deadSide,
        peakBetaDeg: bounded(peakBeta / DEG, 180),
        firstPedalS:
          firstCorrectPedalTick === null || eventTick === null
            ? null
            : (firstCorrectPedalTick - eventTick) / TICK_RATE_HZ,
        stillS: Math.min(3600, Math.max(0, run.timeS - still.sinceS)),
        verdict: verdict.update(now, wanted, deadSide),
      };
    },
  };
  return maker;
}

const bounded = (value: number, most: number): number =>
  Number.isFinite(value) ? Math.max(-most, Math.min(most, value)) : 0;
