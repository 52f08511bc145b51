import { TICK_RATE_HZ } from '#shared/model/plant-types.ts';
import type { ClassEntry } from '#shared/scenario/class-log.ts';
import { eventText, triggerText } from '#shared/scenario/describe.ts';

const at = (tick: number): string => `${(tick / TICK_RATE_HZ).toFixed(1)} s`;

/** An entry of the log in one line; `name` gives a member's name. */
export function entryText(entry: ClassEntry, name: (member: string) => string): string {
  switch (entry.kind) {
    case 'opened':
      return `Opened by ${entry.instructor.name} with ${entry.playlist.map(({ title }) => title).join(', ')}`;
    case 'asked':
      return `${entry.name} asks to join`;
    case 'options':
      return `Room ${entry.options.locked ? 'closed' : 'open'}, names ${entry.options.namesHidden ? 'hidden' : 'shown'}`;
    case 'joined':
      return `${entry.name} joined, seat ${entry.seat}`;
    case 'left':
      return `${name(entry.member)} left`;
    case 'removed':
      return `${name(entry.member)} was sent out`;
    case 'mode':
      return entry.mode === 'demonstration' ? 'Mode: demonstration' : 'Mode: everyone flies';
    case 'scenario':
      return `Scenario ${entry.index + 1} of the playlist chosen`;
    case 'started':
      return `Run ${entry.run} started, seed ${entry.seed}`;
    case 'clock':
      return entry.rate === 0
        ? `Clock stopped at ${at(entry.tick)} (${entry.why})`
        : `Clock at ${at(entry.tick)}, rate ${entry.rate} (${entry.why})`;
    case 'branched':
      return `Branch ${entry.branch} from ${at(entry.tick)}`;
    case 'injected':
      return `Added at ${at(entry.tick)}: ${eventText(entry.event)}, ${triggerText(entry.event.at)}`;
    case 'disarmed':
      return `Disarmed ${entry.id} at ${at(entry.tick)}`;
    case 'shown':
      return entry.member === null ? 'Nobody shown' : `${name(entry.member)} shown to all`;
    case 'controls':
      return `${name(entry.member)} has the controls from ${at(entry.tick)}`;
    case 'message':
      return `Message: ${entry.text}`;
    case 'differed':
      return `The picture of ${name(entry.member)} differed at ${at(entry.tick)} and was built again`;
    case 'over':
      return `Run ${entry.run} over at ${at(entry.tick)}`;
    case 'ended':
      return 'Class ended';
  }
}
