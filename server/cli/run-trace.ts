/** What `sidewash run` takes from a run as it goes by: greatest values, and the rows of the CSV file. */
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import type { Observation } from '#shared/model/plant-types.ts';
import type { Run } from '#shared/scenario/run-types.ts';
import { DEG, FT, KT } from '#shared/units/constants.ts';

/** Ticks between rows of the CSV file: 1/20 s. */
const ROW_TICKS = TICK_RATE_HZ / 20;

export interface Extremes {
  bank_deg: number;
  sideslip_deg: number;
  yaw_rate_deg_s: number;
  roll_rate_deg_s: number;
  heading_deg: number;
  rudder_deg: number;
  aileron_deg: number;
  height_loss_ft: number;
  ias_min_kt: number;
}

export interface RunTrace {
  /** Takes in the run's present tick. */
  take(run: Run): void;
  /** Greatest magnitudes over the whole run; the lowest indicated airspeed. */
  readonly extremes: Extremes;
  /** The CSV file, header included. */
  csv(): string;
}

export function createRunTrace(airframe: Airframe, start: Observation, withRows: boolean): RunTrace {
  const startPsi = start.psiRad;
  const startHeight = start.heightM;
  const extremes: Extremes = {
    bank_deg: 0,
    sideslip_deg: 0,
    yaw_rate_deg_s: 0,
    roll_rate_deg_s: 0,
    heading_deg: 0,
    rudder_deg: 0,
    aileron_deg: 0,
    height_loss_ft: 0,
    ias_min_kt: Infinity,
  };
  const rows: string[] = [];

  function takeExtremes(now: Observation): void {
    const raise = (name: Exclude<keyof Extremes, 'ias_min_kt'>, value: number): void => {
      if (value > extremes[name]) extremes[name] = value;
    };
    raise('bank_deg', Math.abs(now.phiRad) / DEG);
    raise('sideslip_deg', Math.abs(now.betaRad) / DEG);
    raise('yaw_rate_deg_s', Math.abs(now.rRadS) / DEG);
    raise('roll_rate_deg_s', Math.abs(now.pRadS) / DEG);
    raise('heading_deg', Math.abs(now.psiRad - startPsi) / DEG);
    raise('rudder_deg', Math.abs(now.rudderRad) / DEG);
    raise('aileron_deg', Math.abs(now.aileronRad) / DEG);
    raise('height_loss_ft', (startHeight - now.heightM) / FT);
    extremes.ias_min_kt = Math.min(extremes.ias_min_kt, now.casMps / KT);
  }

  function row(now: Observation): string {
    const values = [
      now.timeS,
      now.betaRad / DEG,
      now.pRadS / DEG,
      now.rRadS / DEG,
      now.phiRad / DEG,
      now.thetaRad / DEG,
      (now.psiRad - startPsi) / DEG,
      now.tasMps,
      now.casMps / KT,
      now.northM,
      now.eastM,
      now.heightM,
      now.aileronRad / DEG,
      now.rudderRad / DEG,
      now.ballWidths,
      ...now.thrustN,
    ];
    return values.map((value) => String(Number(value.toPrecision(10)))).join(',');
  }

  return {
    extremes,
    take(run) {
      takeExtremes(run.now);
      if (withRows && run.tick % ROW_TICKS === 0) rows.push(row(run.now));
    },
    csv: () => `${[header(airframe), ...rows].join('\n')}\n`,
  };
}

function header({ engines }: Airframe): string {
  const fixedColumns =
    'time_s,beta_deg,p_deg_s,r_deg_s,phi_deg,theta_deg,psi_deg,tas_mps,ias_kt,north_m,east_m,height_m,aileron_deg,rudder_deg,slip_ball';
  return [fixedColumns, ...engines.map(({ name }) => cell(`thrust_N_${name.replaceAll(/\s/gu, '_')}`))].join(',');
}

/** A cell that may hold commas or quotes (RFC 4180). */
function cell(text: string): string {
  return /[",]/u.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}
