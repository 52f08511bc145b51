/** Words for the limits of what is drawn. */
import type { Observation } from '#shared/model/plant-types.ts';

type Seen = Pick<Observation, 'outsideData' | 'finStalled' | 'stallWarning' | 'assistantLetGo'>;

export function validityWords(now: Seen): string {
  const words: string[] = [];
  if (now.outsideData) words.push('outside the data');
  if (now.finStalled) words.push('fin stalled');
  if (now.stallWarning) words.push('stall warning');
  if (now.assistantLetGo) words.push('pitch is let go beyond 70° of bank');
  const text = words.join(', ');
  return text.charAt(0).toUpperCase() + text.slice(1);
}
