/** Beginnings of group names and the topic under which the Checks page gathers them, in the order in which people read. */
const TOPICS: readonly (readonly [begins: string, topic: string])[] = [
  ['Modes:', 'Modes'],
  ['Dimensional derivatives', 'Derivatives and import'],
  ['Import of', 'Derivatives and import'],
  ['Traps in', 'Derivatives and import'],
  ['Transfer function', 'Responses'],
  ['Step response', 'Responses'],
  ['Minimum control speed', 'Minimum control speed'],
  ['Common practice', 'Common practice'],
  ['MIL-F-8785C', 'Levels and criteria'],
  ['Certification', 'Levels and criteria'],
  ['Standard atmosphere', 'Atmosphere and speeds'],
  ['Airspeeds', 'Atmosphere and speeds'],
  ['Turbulence', 'Turbulence'],
  ['Fin and flap', 'Fin and flap estimates'],
];

/**
 * The topic that gathers a group of cases.
 *
 * @param group  Group of a case.
 * @returns      Topic; the group itself where none gathers it.
 * @throws       Nothing.
 * @sign         none
 * @source       none
 */
export function topicOf(group: string): string {
  return TOPICS.find(([begins]) => group.startsWith(begins))?.[1] ?? group;
}
