/** The picture in words, for screen readers: where the aeroplane is, how it stands, what its engines do, which arrows show what. */
import type { Airframe } from '#shared/model/airframe-schema.ts';
import type { Observation } from '#shared/model/plant-types.ts';
import { FT, KT } from '#shared/units/constants.ts';
import { ARROW_IDS, ARROW_NAMES, type ArrowId, type CameraName } from './stage-types.ts';

const VIEW_WORDS: Record<CameraName, string> = {
  chase: 'Seen from behind and to the right',
  nose: 'Seen from the nose',
  tower: 'Seen from the tower',
  top: 'Seen from above',
  side: 'Seen from the right side',
};
const ENGINE_WORDS = [
  'runs',
  'has failed and windmills',
  'has failed, propeller feathered',
  'has lost part of its thrust',
] as const;
/** Below this a force or moment is called none: share of weight, and of weight times span. */
const LEAST_FORCE = 0.002;
const LEAST_MOMENT = 0.0004;

export function describeStage(
  airframe: Pick<Airframe, 'name' | 'engines' | 'geometry'>,
  now: Observation,
  camera: CameraName,
  arrows: ReadonlySet<ArrowId>,
): string {
  const parts = [
    `${VIEW_WORDS[camera]}: ${airframe.name}`,
    `${Math.round(now.casMps / KT)} knots, ${Math.round(now.heightAboveRunwayM / FT)} feet above ground`,
    `heading ${headingText(now.psiRad)}`,
    sided('bank', now.phiRad, 'right', 'left'),
    sided('nose', now.betaRad, 'left of the flight path', 'right of the flight path'),
    sided('rudder', now.rudderRad, 'left', 'right'),
  ];
  airframe.engines.forEach((engine, i) => {
    if (now.engineState[i] > 0) {
      const word = engine.kind === 'jet' && now.engineState[i] < 3 ? 'has failed' : ENGINE_WORDS[now.engineState[i]];
      parts.push(`${engine.name} engine ${word}`);
    }
  });
  const drawn = ARROW_IDS.filter((id) => arrows.has(id)).map((id) => arrowWords(id, now, airframe.geometry.wingSpan_m));
  return `${parts.join(', ')}. ${drawn.length > 0 ? `Arrows: ${drawn.join('; ')}.` : 'No arrows.'}`;
}

function headingText(psiRad: number): string {
  const whole = Math.round((psiRad * 180) / Math.PI);
  const turn = ((whole % 360) + 360) % 360;
  return String(turn === 0 ? 360 : turn).padStart(3, '0');
}

/** "bank 5 degrees left", or "no bank". */
function sided(name: string, angleRad: number, positive: string, negative: string): string {
  const degrees = Math.round((angleRad * 180) / Math.PI);
  if (degrees === 0) return name === 'nose' ? 'nose on the flight path' : `no ${name}`;
  const unit = Math.abs(degrees) === 1 ? 'degree' : 'degrees';
  return `${name} ${Math.abs(degrees)} ${unit} ${degrees > 0 ? positive : negative}`;
}

function arrowWords(id: ArrowId, now: Observation, spanM: number): string {
  const name = ARROW_NAMES[id].toLowerCase();
  const weight = now.forceWeightN;
  const side = (force: number): string =>
    Math.abs(force) < LEAST_FORCE * weight
      ? `${name} none`
      : `${name} ${amount(force)} to the ${force > 0 ? 'right' : 'left'}`;
  const turn = (moment: number): string =>
    Math.abs(moment) < LEAST_MOMENT * weight * spanM
      ? `${name} none`
      : `${name} ${amount(moment)} metres to the ${moment > 0 ? 'right' : 'left'}`;
  switch (id) {
    case 'R':
      return side(now.forceRudderN);
    case 'F':
      return side(now.forceFinN);
    case 'Y':
      return side(now.forceSideN);
    case 'LL':
      return `${name} ${amount(now.forceLiftLeftN)}`;
    case 'LR':
      return `${name} ${amount(now.forceLiftRightN)}`;
    case 'T':
      return `${name} ${Array.from(now.thrustN, (thrust) => amount(thrust)).join(' and ')}`;
    case 'D':
      return `${name} ${amount(now.forceDragN)}`;
    case 'W':
      return `${name} ${amount(weight)}`;
    case 'N':
      return turn(now.yawTotalNm);
    case 'L':
      return turn(now.rollTotalNm);
  }
}

/** "1.4 kilonewtons", "640 newtons"; without sign. */
function amount(value: number): string {
  const size = Math.abs(value);
  return size >= 1000 ? `${(size / 1000).toFixed(1)} kilonewton` : `${size.toFixed(0)} newton`;
}
