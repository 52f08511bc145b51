import { computed, onUnmounted, type Ref } from 'vue';
import { createBenchClient, startAnalysisWorker } from '../../runner/workers/analysis/bench-client.ts';
import type { BenchSubject, DerivativeKey } from '../../runner/workers/analysis/bench-condition.ts';
import type { BandRequest } from '../../runner/workers/analysis/bench-control-speed-band.ts';
import type { CrosswindRequest } from '../../runner/workers/analysis/bench-crosswind.ts';
import type { EngineOutRequest } from '../../runner/workers/analysis/bench-engine-out.ts';
import type { MapRequest } from '../../runner/workers/analysis/bench-map.ts';
import type { ModesRequest } from '../../runner/workers/analysis/bench-modes.ts';
import type { BenchState } from './bench-state.ts';
import { useBenchPicture } from './use-bench.ts';
import type { BenchConditionOfState } from './use-bench-condition.ts';
import { derivativeReach } from './use-sweep.ts';

/** Nodes along each axis of the stability map; its boundaries are found on the model between them. */
const MAP_NODES = 64;
const RESPONSE_ENDS_S = 12;
const OUTPUTS = { beta: 0, p: 1, r: 2, phi: 3 } as const;

/** Reactive proxies do not pass to a worker. */
export const plain = <T>(value: T): T => JSON.parse(JSON.stringify(value)) as T; // a copy of the same shape

/** What the shown tab needs, computed beside the page; tabs that are not shown ask for nothing. */
export function useBenchPictures(
  state: Ref<BenchState>,
  subjects: Ref<BenchSubject[]>,
  bench: Pick<BenchConditionOfState, 'condition' | 'baseValue'>,
  sweepValues: Ref<number[]>,
) {
  const { condition, baseValue } = bench;
  const client = createBenchClient(startAnalysisWorker);
  const bandClient = createBenchClient(startAnalysisWorker);
  onUnmounted(() => {
    client.close();
    bandClient.close();
  });
  const shows = (tab: BenchState['tab']): boolean => subjects.value.length > 0 && state.value.tab === tab;
  /** Copied once for each set of revisions, not for each step of a slider. */
  const still = computed(() => plain(subjects.value));
  const conditionNow = computed(() => plain(condition.value));

  const rangeOf = (key: DerivativeKey): [number, number] => {
    const base = baseValue(key);
    const reach = derivativeReach(base);
    return [Number((base - reach).toPrecision(3)), Number((base + reach).toPrecision(3))];
  };
  const failed = computed(() => (state.value.failed === '' ? [] : state.value.failed.split(',')));

  const modesRequest = computed<ModesRequest | null>(() =>
    shows('modes')
      ? {
          kind: 'modes',
          condition: conditionNow.value,
          subjects: still.value,
          sweep: { kind: state.value.sweep, values: [...sweepValues.value] },
        }
      : null,
  );
  const mapRequest = computed<MapRequest | null>(() => {
    if (!shows('map')) return null;
    const { x, y, input, shape, amplitude, lasts, bode, output } = state.value;
    return {
      kind: 'map',
      condition: conditionNow.value,
      subjects: still.value,
      axes: { x, y, xRange: rangeOf(x), yRange: rangeOf(y), nodes: MAP_NODES },
      response: { input, shape, amplitudeDeg: amplitude, durationS: lasts, endS: RESPONSE_ENDS_S },
      bode: { input: bode, output: OUTPUTS[output] },
    };
  });
  const engineRequest = computed<EngineOutRequest | null>(() =>
    shows('engine-out')
      ? {
          kind: 'engine-out',
          condition: conditionNow.value,
          subjects: still.value,
          failed: failed.value,
          lever: state.value.lever,
          feathered: state.value.feathered === 'yes',
        }
      : null,
  );
  const bandRequest = computed<BandRequest | null>(() => {
    const request = engineRequest.value;
    return request ? { ...request, kind: 'control-speed-band', subjects: request.subjects.slice(0, 1) } : null;
  });
  const crosswindRequest = computed<CrosswindRequest | null>(() =>
    shows('crosswind') ? { kind: 'crosswind', condition: conditionNow.value, subjects: still.value } : null,
  );
  return {
    mapRequest,
    modes: useBenchPicture(client, modesRequest),
    map: useBenchPicture(client, mapRequest),
    engineOut: useBenchPicture(client, engineRequest),
    band: useBenchPicture(bandClient, bandRequest),
    crosswind: useBenchPicture(client, crosswindRequest),
  };
}
