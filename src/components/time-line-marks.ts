/** Geometry of the small time line: marks stand above their time and are pushed apart where they would touch. */
export interface TimeLineEvent {
  lane: 'engines' | 'air' | 'controls' | 'systems' | 'notes';
  /** Null where the event waits for a condition. */
  atS: number | null;
}

export interface TimeLineMark {
  letter: string;
  /** Engine events carry the colour of the dead side. */
  engine: boolean;
  /** Left edge of the flag, and foot of its stem; px. The foot is null without a known time. */
  x: number;
  footX: number | null;
}

export const LANE_LETTERS = { engines: 'E', air: 'G', controls: 'C', systems: 'S', notes: 'N' } as const;
export const LANE_WORDS = {
  engines: 'Engines',
  air: 'Air',
  controls: 'Controls',
  systems: 'Systems',
  notes: 'Notes',
} as const;
const FLAG_PX = 18;
const LEFT_PX = 2;

export function timeLineMarks(events: readonly TimeLineEvent[], pxPerS: number): TimeLineMark[] {
  const sorted = [...events].sort((a, b) => (a.atS ?? Infinity) - (b.atS ?? Infinity));
  let free = LEFT_PX;
  return sorted.map((event) => {
    const footX = event.atS === null ? null : LEFT_PX + event.atS * pxPerS;
    const x = Math.max(free, footX ?? free);
    free = x + FLAG_PX;
    return { letter: LANE_LETTERS[event.lane], engine: event.lane === 'engines', x, footX };
  });
}
