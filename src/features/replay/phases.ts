/** Recognise, correct, hold: the phases of a reaction on the scrubber. */
import { TICK_S } from '#shared/model/plant-types.ts';
import type { ScrubberPhase } from '../../components/timeline/scrubber-scale.ts';
import type { ReactionMarks } from '../../runner/reaction-marks.ts';

const seconds = (value: number): string => `${value.toFixed(1)} s`;

export function phasesOf(marks: ReactionMarks, durationS: number, deadSide: boolean): ScrubberPhase[] {
  if (marks.eventTick === null) {
    return [{ id: 'all', text: 'nothing happened', fromS: 0, toS: durationS, kind: 'plain' }];
  }
  const eventS = marks.eventTick * TICK_S;
  const pedalS = marks.firstCorrectPedalTick === null ? null : marks.firstCorrectPedalTick * TICK_S;
  const calmS = marks.yawArrestedTick === null ? null : marks.yawArrestedTick * TICK_S;
  const phases: ScrubberPhase[] = [];
  const add = (id: string, text: string, fromS: number, toS: number, kind: ScrubberPhase['kind']): void => {
    if (toS - fromS > 1e-9) phases.push({ id, text, fromS, toS, kind });
  };
  add('before', deadSide ? 'all engines' : 'undisturbed', 0, eventS, 'plain');
  if (pedalS === null) {
    add('recognise', 'no correct pedal', eventS, durationS, 'dead');
    return phases;
  }
  add('recognise', `recognise ${seconds(pedalS - eventS)}`, eventS, pedalS, 'dead');
  if (calmS === null || calmS <= pedalS) {
    const open = calmS === null;
    add('correct', open ? 'correct, not arrested' : 'hold', pedalS, durationS, open ? 'shade' : 'plain');
    return phases;
  }
  add('correct', `correct ${seconds(calmS - pedalS)}`, pedalS, calmS, 'shade');
  add('hold', 'hold', calmS, durationS, 'plain');
  return phases;
}
