import { refDebounced } from '@vueuse/core';
import { computed, type ComputedRef, type Ref } from 'vue';
import { prepareAircraft, stallTasMps } from '#shared/model/aircraft.ts';
import { densityAt } from '#shared/model/atmosphere.ts';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { buildSmallDisturbance } from '#shared/model/small-disturbance.ts';
import { criticalEngine } from '#shared/analysis/critical-engine.ts';
import { modalCriteria, type CriterionResult } from '#shared/analysis/criteria-8785c.ts';
import { modeShapes } from '#shared/analysis/mode-shapes.ts';
import { lateralModes } from '#shared/analysis/modes.ts';
import { rudderAuthority } from '#shared/analysis/rudder-authority.ts';
import { DEG, KT } from '#shared/units/constants.ts';

export interface CriterionLine {
  title: string;
  configuration: string;
  value: string;
  level: string;
  state: 'met' | 'near' | 'not';
}
export interface RevisionFacts {
  /** Name of the critical engine, computed; null without engine moments. */
  critical: ComputedRef<string | null>;
  neededRudder: ComputedRef<{ kt: number[]; deg: (number | null)[] } | null>;
  criteria: ComputedRef<CriterionLine[]>;
  massWords: ComputedRef<string>;
}

/** Speed of the criteria shown at release, as a multiple of the 1 g stall speed. */
const CRITERIA_SPEED = 1.3;

/** What the data implies, recomputed a moment after it stops changing. */
export function useRevisionFacts(airframe: Ref<Airframe | null>, configuration: Ref<number>): RevisionFacts {
  const settled = refDebounced(airframe, 150);
  const aircraft = computed(() => {
    const data = settled.value;
    const chosen = data?.configurations[configuration.value] ?? data?.configurations[0];
    return data && chosen ? quietly(() => prepareAircraft(data, { configuration: chosen.name })) : null;
  });
  const worst = computed(() => {
    const ready = aircraft.value;
    return ready && ready.engines.length > 0 ? quietly(() => criticalEngine(ready, { heightM: 0 })) : null;
  });
  return {
    critical: computed(() => worst.value?.name ?? null),
    neededRudder: computed(() => {
      const ready = aircraft.value;
      const failed = worst.value;
      if (!ready || !failed) return null;
      const slow = stallTasMps(ready, densityAt(0));
      const speeds = Array.from({ length: 40 }, (_, i) => slow + ((340 * KT - slow) * i) / 39).filter((v) => v > 0);
      const points = quietly(() => rudderAuthority(ready, 0, [failed.index], speeds));
      if (!points) return null;
      return {
        kt: points.map((p) => p.tasMps / KT),
        deg: points.map((p) => (p.neededZeroSideslipRad === null ? null : Math.abs(p.neededZeroSideslipRad) / DEG)),
      };
    }),
    criteria: computed(() => (settled.value ? criteriaOf(settled.value) : [])),
    massWords: computed(() => (settled.value ? massWords(settled.value) : '')),
  };
}

/** The value, or null where the data does not let it be computed: the figure then stays empty and the page stands. */
function quietly<T>(compute: () => T): T | null {
  try {
    return compute();
  } catch {
    return null;
  }
}

function criteriaOf(airframe: Airframe): CriterionLine[] {
  return airframe.configurations.flatMap((configuration) => {
    const results = quietly(() => {
      const aircraft = prepareAircraft(airframe, { configuration: configuration.name });
      const tasMps = CRITERIA_SPEED * stallTasMps(aircraft, densityAt(0));
      const system = buildSmallDisturbance(aircraft, { tasMps, heightM: 0 });
      const found = lateralModes(system.A);
      const shape = modeShapes(system.A, 4, found, tasMps, 1).find((s) => s.mode.kind === 'dutch-roll');
      const klass = aircraft.class === 'II' ? 'II-L' : aircraft.class;
      return modalCriteria(found, shape?.phiOverBeta ?? null, klass, configuration.category);
    });
    return (results ?? [])
      .filter((r) => r.level !== null && typeof r.level === 'number')
      .map((r) => lineOf(r, configuration.name));
  });
}

function lineOf(result: CriterionResult, configuration: string): CriterionLine {
  const level = typeof result.level === 'number' ? result.level : 4;
  return {
    title: result.title,
    configuration,
    value: result.value === null ? '–' : `${Number(result.value.toPrecision(3))} ${result.unit}`.trim(),
    level: level === 4 ? 'below Level 3' : `Level ${level}`,
    state: level === 1 ? 'met' : level === 4 ? 'not' : 'near',
  };
}

function massWords(airframe: Airframe): string {
  const { geometry, mass } = airframe;
  const aspect = (geometry.wingSpan_m ** 2 / geometry.wingArea_m2).toFixed(1);
  const product =
    mass.Ixx_kgm2 * mass.Izz_kgm2 > mass.Ixz_kgm2 ** 2 ? 'Ixx·Izz exceeds Ixz²' : 'Ixx·Izz does not exceed Ixz²';
  return `${product}. Aspect ratio ${aspect}. Criteria at release: ${CRITERIA_SPEED} stall speeds, sea level.`;
}
