/** The drawn forces and moments: tag, name, line and head, as on the look page. Colours come from the tokens. */
export type ArrowKind = 'R' | 'F' | 'Y' | 'LL' | 'LR' | 'T' | 'D' | 'W' | 'N' | 'L';

export interface ArrowLook {
  id: ArrowKind;
  name: string;
  colour: string;
  /** Shape of line and head, drawn by the legend. */
  line: 'solid' | 'thin' | 'long-dash' | 'dots' | 'short-dash' | 'double' | 'arc' | 'double-arc';
}

export const ARROW_LOOKS: readonly ArrowLook[] = [
  { id: 'R', name: 'Rudder force', colour: 'var(--f-rudder)', line: 'solid' },
  { id: 'F', name: 'Fin force', colour: 'var(--f-fin)', line: 'long-dash' },
  { id: 'Y', name: 'Side force', colour: 'var(--f-side)', line: 'dots' },
  { id: 'LL', name: 'Lift, left wing', colour: 'var(--f-lift-l)', line: 'thin' },
  { id: 'LR', name: 'Lift, right wing', colour: 'var(--f-lift-r)', line: 'solid' },
  { id: 'T', name: 'Thrust', colour: 'var(--f-thrust)', line: 'solid' },
  { id: 'D', name: 'Drag', colour: 'var(--f-drag)', line: 'short-dash' },
  { id: 'W', name: 'Weight', colour: 'var(--f-weight)', line: 'double' },
  { id: 'N', name: 'Yawing moment', colour: 'var(--m-yaw)', line: 'arc' },
  { id: 'L', name: 'Rolling moment', colour: 'var(--m-roll)', line: 'double-arc' },
];

export const ALL_ARROWS: readonly ArrowKind[] = ARROW_LOOKS.map((look) => look.id);

/** Sets that answer one question each. */
export const ARROW_PRESETS: readonly { id: string; name: string; arrows: readonly ArrowKind[] }[] = [
  { id: 'yaw', name: 'What yaws it', arrows: ['R', 'F', 'Y', 'T', 'D', 'N'] },
  { id: 'roll', name: 'What rolls it', arrows: ['R', 'F', 'LL', 'LR', 'L'] },
  { id: 'all', name: 'All', arrows: ALL_ARROWS },
  { id: 'none', name: 'None', arrows: [] },
];

export const samePreset = (shown: ReadonlySet<ArrowKind>, arrows: readonly ArrowKind[]): boolean =>
  shown.size === arrows.length && arrows.every((arrow) => shown.has(arrow));
