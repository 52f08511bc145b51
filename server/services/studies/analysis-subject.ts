import type { StudyState } from '#shared/contracts/studies.ts';
import { DERIVATIVE_KEYS, type BenchCondition, type DerivativeKey } from '#shared/analysis/bench-condition.ts';
import { prepareAircraft, stallTasMps } from '#shared/model/aircraft.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { casFromTas, tasFromCas } from '#shared/model/airspeeds.ts';
import { densityAt } from '#shared/model/atmosphere.ts';
import { FT, KT } from '#shared/units/constants.ts';
import { z } from 'zod';

const number = (low: number, high: number, otherwise: number) =>
  z.coerce.number().min(low).max(high).catch(otherwise).default(otherwise);
const choice = <const V extends readonly [string, ...string[]]>(values: V) =>
  z.enum(values).nullable().catch(null).default(null);

/** Members of the Analysis screen's address that say what is computed. What cannot be read takes its default, as there. */
const membersSchema = z.object({
  configuration: z.string().default(''),
  loading: z.string().default(''),
  /** Calibrated, kt; 0 takes 1.5 stall speeds. */
  ias: number(0, 700, 0),
  /** Feet. */
  height: number(-1000, 60_000, 0),
  class: choice(['I', 'II-L', 'II-C', 'III', 'IV']),
  category: choice(['A', 'B', 'C']),
  damper: z.enum(['off', 'on']).catch('off').default('off'),
  shifts: z.string().default(''),
  failed: z.string().default(''),
  lever: number(0, 1, 1),
  feathered: z.enum(['no', 'yes']).catch('no').default('no'),
});

export interface AnalysisSubject {
  condition: BenchCondition;
  casKt: number;
  heightFt: number;
  failed: string[];
  lever: number;
  feathered: boolean;
}

const DEFAULT_STALLS = 1.5;
const LARGEST_SHIFT = 10;

/** "Cn_beta:0.02,Cl_beta:-0.01" */
function shiftsOf(text: string): Partial<Record<DerivativeKey, number>> {
  const shifts: Partial<Record<DerivativeKey, number>> = {};
  for (const part of text.split(',')) {
    const [name, by] = part.split(':');
    const key = DERIVATIVE_KEYS.find((known) => known === name);
    const value = Number(by);
    if (key !== undefined && by !== undefined && Number.isFinite(value) && Math.abs(value) <= LARGEST_SHIFT)
      shifts[key] = value;
  }
  return shifts;
}

/** The condition that a state means for an airframe. */
export function analysisSubject(state: StudyState, airframe: Airframe): AnalysisSubject {
  const members = membersSchema.parse(state);
  const configuration = (
    airframe.configurations.find((c) => c.name === members.configuration) ?? airframe.configurations[0]
  ).name;
  const heightM = members.height * FT;
  const aircraft = prepareAircraft(airframe, { configuration });
  const stallKt = casFromTas(stallTasMps(aircraft, densityAt(heightM)), heightM) / KT;
  const casKt = members.ias > 0 ? members.ias : Math.round(DEFAULT_STALLS * stallKt);
  return {
    condition: {
      configuration,
      loading: members.loading === '' ? null : members.loading,
      tasMps: tasFromCas(casKt * KT, heightM),
      heightM,
      klass: members.class,
      category: members.category,
      yawDamper: members.damper === 'on',
      shifts: shiftsOf(members.shifts),
    },
    casKt,
    heightFt: members.height,
    failed: members.failed.split(',').filter((name) => name !== ''),
    lever: members.lever,
    feathered: members.feathered === 'yes',
  };
}
