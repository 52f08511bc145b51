/** End plates of the balance strip: dead hatched, live stippled, plain with all engines running. */
import type { DeadSide } from './balance-verdict.ts';

export interface StripPlate {
  fill: string;
  stroke: string;
  text: string;
  kind: 'dead' | 'live' | '';
}

function plate(side: 'LEFT' | 'RIGHT', kind: StripPlate['kind']): StripPlate {
  const word = kind === '' ? '' : kind.toUpperCase();
  const text =
    side === 'LEFT' ? `◂ LEFT${word === '' ? '' : ` · ${word}`}` : `${word === '' ? '' : `${word} · `}RIGHT ▸`;
  return kind === ''
    ? { fill: 'none', stroke: 'var(--edge)', text, kind }
    : { fill: `url(#h-${kind})`, stroke: `var(--${kind})`, text, kind };
}

export function stripPlates(deadSide: DeadSide): { left: StripPlate; right: StripPlate } {
  if (deadSide === 0) return { left: plate('LEFT', ''), right: plate('RIGHT', '') };
  return deadSide > 0
    ? { left: plate('LEFT', 'dead'), right: plate('RIGHT', 'live') }
    : { left: plate('LEFT', 'live'), right: plate('RIGHT', 'dead') };
}
