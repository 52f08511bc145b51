/** Shapes that figures are drawn from: plain arrays in display units. */
export interface PlotSeries {
  name: string;
  x: readonly (number | null)[];
  y: readonly (number | null)[];
  line?: 'solid' | 'dashed' | 'dotted' | 'chain';
  /** Side of the curve that is not available; hatched. */
  forbid?: 'above' | 'below';
  /** Stroke width; by the kind of line without it. */
  weight?: number;
  /** Of second rank: grey ink. */
  grey?: boolean;
}
export interface PlotBand {
  name: string;
  x: readonly number[];
  low: readonly number[];
  high: readonly number[];
}
export interface PlotPoint {
  x: number;
  y: number;
  text?: string;
  shape?: 'disc' | 'ring' | 'cross';
  anchor?: 'start' | 'end';
}
export interface PlotPost {
  x: number;
  text: string;
  /** Its name stands at the foot of the plot. */
  low?: boolean;
}
/** A complex root of the characteristic equation, 1/s; only the upper half-plane is drawn. */
export interface PlotRoot {
  re: number;
  im: number;
  name?: string;
}
/** Table behind a figure: what the table toggle shows and what the CSV holds. */
export interface FigureTable {
  head: readonly string[];
  rows: readonly (readonly (string | number | null)[])[];
}
/** Where oscillations reach a level: real part over the imaginary part, both 1/s. */
export interface LevelBoundary {
  level: 1 | 2 | 3;
  dutchRoll: readonly { re: number; im: number }[];
}
/** Lines of compared revisions, the one looked at first. */
export const REVISION_LINES = ['solid', 'dashed', 'dotted', 'chain'] as const;
export type PlotLine = (typeof REVISION_LINES)[number];
export const LINE_DASHES: Readonly<Record<PlotLine, string | undefined>> = {
  solid: undefined,
  dashed: '7 4',
  dotted: '2 3',
  chain: '9 3 2 3',
};
