/** Speeds marked on the airspeed edge: those in the data, and the computed minimum control and stall speeds. */
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { KT } from '#shared/units/constants.ts';
import type { SpeedMark } from '../../components/instruments/StageFrame.vue';

export interface ComputedSpeeds {
  /** Calibrated, critical engine, bank up to 5°; null when there is none. */
  minimumControlMps: number | null;
  stallMps: number | null;
}

/**
 * The stall is the hatched floor where it is the higher of the two: below it a minimum control speed means nothing.
 */
export function speedMarks(airframe: Airframe, configuration: string | null, computed: ComputedSpeeds): SpeedMark[] {
  const marks: SpeedMark[] = [];
  const { minimumControlMps: vmc, stallMps: stall } = computed;
  const stallIsFloor = stall !== null && (vmc === null || stall >= vmc);
  if (vmc !== null && !stallIsFloor) marks.push({ name: 'Vmca', casMps: vmc, floor: true });
  if (stall !== null) marks.push({ name: 'stall', casMps: stall, floor: stallIsFloor });
  const row = airframe.configurations.find((c) => c.name === configuration) ?? airframe.configurations[0];
  const listed = [
    ...(row?.speeds ?? []),
    ...(airframe.speeds ?? []).filter(
      (speed) => speed.configuration === undefined || speed.configuration === row?.name,
    ),
  ];
  for (const speed of listed) {
    const casMps = speed.kt * KT;
    if (marks.some((mark) => mark.name === speed.name && Math.abs(mark.casMps - casMps) < 0.5 * KT)) continue;
    marks.push({ name: speed.name, casMps });
  }
  return marks;
}
