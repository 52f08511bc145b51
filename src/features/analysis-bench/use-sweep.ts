import { computed, type Ref } from 'vue';
import { tasFromCas } from '#shared/model/airspeeds.ts';
import { FT, KT } from '#shared/units/constants.ts';
import { inUnit, unitOf, type UnitPreference } from '#shared/units/quantity.ts';
import type { DerivativeKey } from '../../runner/workers/analysis/bench-condition.ts';
import type { BenchState } from './bench-state.ts';
import type { BenchConditionOfState } from './use-bench-condition.ts';
import { derivativeText } from './words.ts';

const TOP_FT = 40_000;
const STEPS = 13;

/** How far a derivative can be moved either way; per rad. */
export const derivativeReach = (base: number): number => Math.max(0.05, Math.abs(base) * 1.5);

/** What is swept: speed, height, or one derivative moved by a constant; as the ruler shows it, and its steps. */
export function useSweep(
  state: Ref<BenchState>,
  set: (members: Partial<BenchState>) => void,
  bench: Pick<BenchConditionOfState, 'stall' | 'ias' | 'baseValue'>,
  units: () => UnitPreference,
) {
  const { stall, ias, baseValue } = bench;
  const ruler = computed(() => {
    const kind = state.value.sweep;
    if (kind === 'speed') {
      const shown = (kt: number): number => inUnit(kt * KT, 'speed', units());
      return {
        value: shown(ias.value),
        min: Math.floor(shown(stall.value * 0.9)),
        max: Math.ceil(shown(stall.value * 3.2)),
        step: units() === 'si' ? 0.5 : 1,
        label: 'Calibrated airspeed',
        unit: unitOf('speed', units()),
        digits: 0,
        below: { value: shown(stall.value), text: 'stall' },
      };
    }
    if (kind === 'height') {
      const shown = (ft: number): number => inUnit(ft * FT, 'height', units());
      return {
        value: shown(state.value.height),
        min: 0,
        max: Math.round(shown(TOP_FT)),
        step: units() === 'si' ? 50 : 100,
        label: 'Height',
        unit: unitOf('height', units()),
        digits: 0,
        below: null,
      };
    }
    const base = baseValue(kind);
    const reach = derivativeReach(base);
    return {
      value: base + (state.value.shifts[kind] ?? 0),
      min: Number((base - reach).toPrecision(3)),
      max: Number((base + reach).toPrecision(3)),
      step: Number((reach / 200).toPrecision(2)),
      label: `${derivativeText(kind)} of the first entry`,
      unit: 'per rad',
      digits: 4,
      below: null,
    };
  });
  function shift(key: DerivativeKey, by: number): void {
    set({ shifts: { ...state.value.shifts, [key]: Number(by.toPrecision(6)) } });
  }
  /** The ruler was moved to a value in its unit. */
  function move(shown: number): void {
    const kind = state.value.sweep;
    if (kind === 'speed') set({ ias: Number((units() === 'si' ? shown / KT : shown).toFixed(3)) });
    else if (kind === 'height') set({ height: Number((units() === 'si' ? shown / FT : shown).toFixed(1)) });
    else shift(kind, shown - baseValue(kind));
  }
  /** SI; derivatives as shifts. */
  const values = computed(() => {
    const kind = state.value.sweep;
    const heightM = state.value.height * FT;
    if (kind === 'speed')
      return Array.from({ length: STEPS }, (_, i) => tasFromCas(stall.value * KT * (1.05 + i * 0.16), heightM));
    if (kind === 'height') return Array.from({ length: STEPS }, (_, i) => (i * TOP_FT * FT) / (STEPS - 1));
    const reach = derivativeReach(baseValue(kind));
    return Array.from({ length: STEPS }, (_, i) => -reach + (2 * i * reach) / (STEPS - 1));
  });
  return { ruler, move, shift, values };
}
