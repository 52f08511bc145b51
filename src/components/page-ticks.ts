/** Geometry of the page ruler. */
export interface PageTicks {
  ticks: string;
  barX: number;
  barWidth: number;
  caret: string;
}

const EVERY_TEN_ABOVE = 40;
const MIN_BAR_PX = 4;

/** Ticks, bar and caret of `page` (1-based) of `pages` on a ruler `width` px long. */
export function pageTicks(page: number, pages: number, width: number): PageTicks {
  const span = width - 1;
  const step = pages > EVERY_TEN_ABOVE ? 10 : 1;
  const x = (index: number): number => 0.5 + (span * index) / pages;
  let ticks = '';
  for (let index = 0; index < pages; index += step) ticks += `M${round(x(index))} 8v8`;
  ticks += `M${round(x(pages))} 8v8`;
  const barWidth = Math.max(MIN_BAR_PX, span / pages);
  const barX = Math.min(x(page - 1), width - 0.5 - barWidth);
  const middle = barX + barWidth / 2;
  return { ticks, barX: round(barX), barWidth: round(barWidth), caret: `M${round(middle - 5)} 3h10l-5 6z` };
}

function round(value: number): number {
  return Math.round(value * 100) / 100;
}
