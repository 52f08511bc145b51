/** The plate of a scenario: its own aeroplane from its data, in the attitude of an attempt where there is one. */
import type { ScenarioRevision } from '#shared/contracts/scenarios.ts';
import { DEG } from '#shared/units/constants.ts';
import type { PlateSpec } from '../../components/plate/plate-scene.ts';
import type { ReplayMoment } from './replay-moment.ts';

const WIDTH = 444;
const HEIGHT = 322;
/** Attitude shown before the first attempt: on its path, wings level. */
const PITCH_DEG = 5;

export interface ScenarioPlate {
  spec: PlateSpec;
  /** For assistive technology. */
  words: string;
  /** Beneath the picture; begins in lower case after "Your attempt 2, ". */
  caption: string;
}

/** Engines that the scenario fails, by index in the airframe. */
export function failedEngines({ scenario, airframe }: Pick<ScenarioRevision, 'scenario' | 'airframe'>): number[] {
  const names = scenario.events.flatMap((event) => (event.kind === 'engine-failure' ? [event.engine] : []));
  return airframe.airframe.engines.flatMap((engine, index) => (names.includes(engine.name) ? [index] : []));
}

function side(value: number, positive: string, negative: string): string {
  return value >= 0 ? positive : negative;
}

export function scenarioPlate(revision: ScenarioRevision, moment: ReplayMoment | null): ScenarioPlate {
  const { geometry, fin, engines, name } = revision.airframe.airframe;
  const failed = failedEngines(revision);
  const betaDeg = (moment?.now.betaRad ?? 0) / DEG;
  const bankDeg = (moment?.now.phiRad ?? 0) / DEG;
  const spec: PlateSpec = {
    width: WIDTH,
    height: HEIGHT,
    shape: {
      spanM: geometry.wingSpan_m,
      chordM: geometry.meanChord_m,
      finArmM: fin?.arm_m ?? 0.42 * geometry.wingSpan_m,
      finHeightM: fin?.height_m ?? 0.08 * geometry.wingSpan_m,
      engines: engines.map((engine) => ({ kind: engine.kind, yM: engine.y_m })),
      rudderDeg: (moment?.now.rudderRad ?? 0) / -DEG,
    },
    failed: moment === null || moment.eventS !== null ? failed : [],
    attitude: { headingDeg: 0, pitchDeg: PITCH_DEG, bankDeg },
    // Positive sideslip is wind from the right: the flight path lies to the right of the nose.
    pathRightDeg: betaDeg,
    pathUpDeg: -PITCH_DEG,
    sightDeg: 30,
    aboveDeg: 14,
    distanceSpans: 1.34,
    focal: 480,
    heightM: 1.15 * geometry.wingSpan_m,
    place: [0.47, 0.56],
    runway: { offsetM: 1.1 * geometry.wingSpan_m, widthM: 2.2 * geometry.wingSpan_m },
  };
  const lost = failed.map((index) => engines[index]?.name ?? '').join(' and ');
  const words = `${name}${lost === '' ? '' : `, ${lost} engine failed`}`;
  if (moment === null) {
    return {
      spec,
      words,
      caption: lost === '' ? `${name}, from its data.` : `${name}, from its data. The ${lost} engine will fail.`,
    };
  }
  const pedal = Math.round(moment.now.pedal * 100);
  const since = `${moment.sinceS.toFixed(1)} s after ${moment.eventS === null ? 'the start' : 'the first event'}`;
  return {
    spec,
    words: `${words}, ${since}`,
    caption:
      `${since}: flight path ${Math.abs(betaDeg).toFixed(1)}° ${side(betaDeg, 'right', 'left')} of the nose, ` +
      `bank ${Math.abs(bankDeg).toFixed(1)}° ${side(bankDeg, 'right', 'left')}, ` +
      (Math.abs(pedal) < 1 ? 'no pedal.' : `pedal ${Math.abs(pedal)} % ${side(pedal, 'right', 'left')}.`),
  };
}
