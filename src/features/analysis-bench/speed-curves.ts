/** Series and tables of minimum control speed curves in the preferred unit. */
import { unitOf, type UnitPreference } from '#shared/units/quantity.ts';
import { REVISION_LINES, type FigureTable, type PlotSeries } from '../../components/charts/figures/plot-types.ts';
import type { EngineOutPicture, SpeedCurve } from '../../runner/workers/analysis/bench-engine-out.ts';
import { shownSpeed, shownSpeeds } from './words.ts';

type Subject = EngineOutPicture['subjects'][number];

export function speedSeries(
  subjects: readonly Subject[],
  pick: (subject: Subject) => SpeedCurve,
  units: UnitPreference,
  scaleX: (at: number) => number = (at) => at,
): PlotSeries[] {
  return subjects.map((s, i) => ({
    name: s.label,
    x: pick(s).at.map(scaleX),
    y: shownSpeeds(pick(s).kt, units),
    line: REVISION_LINES[i] ?? 'chain',
  }));
}

/** One row a point of each revision: their points differ where their kinks do. */
export function speedTable(
  subjects: readonly Subject[],
  pick: (subject: Subject) => SpeedCurve,
  units: UnitPreference,
  name: string,
  scaleX: (at: number) => number = (at) => at,
): FigureTable {
  return {
    head: ['Revision', name, `Vmca, ${unitOf('speed', units)} calibrated`, 'Binds'],
    rows: subjects.flatMap((s) =>
      pick(s).at.map((at, i) => [
        s.label,
        Number(scaleX(at).toPrecision(6)),
        shownSpeed(pick(s).kt[i] ?? null, units),
        pick(s).binds[i] ?? '',
      ]),
    ),
  };
}

export const revisionLegend = (subjects: readonly { label: string }[]) =>
  subjects.map((s, i) => ({ name: s.label, line: REVISION_LINES[i] ?? ('chain' as const) }));
