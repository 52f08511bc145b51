import { computed, type Ref } from 'vue';
import type { AircraftClass } from '#shared/analysis/criteria-tables.ts';
import { dutchRollMinima, rollModeMaxima } from '#shared/analysis/criteria-tables.ts';
import { prepareAircraft, stallTasMps } from '#shared/model/aircraft.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { casFromTas, tasFromCas } from '#shared/model/airspeeds.ts';
import { densityAt } from '#shared/model/atmosphere.ts';
import { letterOf, sourceLetters } from '#shared/model/source-letters.ts';
import { valueSource } from '#shared/model/value-source.ts';
import { FT, KT } from '#shared/units/constants.ts';
import {
  DERIVATIVE_KEYS,
  type BenchCondition,
  type DerivativeKey,
} from '../../runner/workers/analysis/bench-condition.ts';
import type { BenchState } from './bench-state.ts';
import type { SourcesOfDerivatives } from './words.ts';

const GUESSED_STALL_KT = 60;

/** The condition of the state on this airframe, and what the airframe says about it. */
export function useBenchCondition(state: Ref<BenchState>, airframe: Ref<Airframe | null>) {
  const configurations = computed(() => airframe.value?.configurations.map((c) => c.name) ?? []);
  const configuration = computed(() =>
    configurations.value.includes(state.value.configuration)
      ? state.value.configuration
      : (configurations.value[0] ?? ''),
  );
  const loadings = computed(() => airframe.value?.loadings?.map((l) => l.name) ?? []);
  const chosen = computed(() => airframe.value?.configurations.find((c) => c.name === configuration.value) ?? null);
  const prepared = computed(() => {
    if (!airframe.value) return null;
    const loading = loadings.value.includes(state.value.loading) ? state.value.loading : null;
    try {
      return prepareAircraft(airframe.value, { configuration: configuration.value, loading });
    } catch {
      // A draft with errors: the worker's answer says what is wrong, the rulers go on with a guess.
      return null;
    }
  });
  /** Calibrated, kt. */
  const stall = computed(() => {
    const heightM = state.value.height * FT;
    return prepared.value
      ? casFromTas(stallTasMps(prepared.value, densityAt(heightM)), heightM) / KT
      : GUESSED_STALL_KT;
  });
  const ias = computed(() => state.value.ias || Math.round(1.5 * stall.value));
  const condition = computed<BenchCondition>(() => ({
    configuration: configuration.value,
    loading: state.value.loading || null,
    tasMps: tasFromCas(ias.value * KT, state.value.height * FT),
    heightM: state.value.height * FT,
    klass: state.value.class || null,
    category: state.value.category || null,
    yawDamper: state.value.damper === 'on',
    shifts: state.value.shifts,
  }));
  /** A derivative in the first entry of the configuration, unmoved; per rad. */
  const baseValue = (key: DerivativeKey): number => chosen.value?.derivatives[0]?.[key] ?? 0;

  const sources = computed<SourcesOfDerivatives>(() => {
    const index = Math.max(0, airframe.value?.configurations.findIndex((c) => c.name === configuration.value) ?? 0);
    const out: SourcesOfDerivatives = {};
    const letters = airframe.value ? sourceLetters(airframe.value) : [];
    for (const key of DERIVATIVE_KEYS) {
      const { text, uncertaintyPct } = valueSource(airframe.value, `/configurations/${index}/derivatives/0/${key}`);
      out[key] = { text: text ?? '', pct: uncertaintyPct, letter: letterOf(letters, text) };
    }
    return out;
  });
  /** What Level 1 asks for this class and category. */
  const level1 = computed(() => {
    if (!airframe.value || !chosen.value) return null;
    const klass: AircraftClass = state.value.class || (airframe.value.class === 'II' ? 'II-L' : airframe.value.class);
    const category = state.value.category || chosen.value.category;
    const dutch = dutchRollMinima(klass, category)[0];
    return { klass, category, zeta: dutch.zeta, omega: dutch.omega, rollTau: rollModeMaxima(klass, category)[0] };
  });
  return { configurations, configuration, loadings, prepared, stall, ias, condition, baseValue, sources, level1 };
}
export type BenchConditionOfState = ReturnType<typeof useBenchCondition>;
