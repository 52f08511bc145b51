/** Colours for canvases, read from the tokens of the page; canvases cannot use CSS variables. */
export interface InkTokens {
  ink: string;
  ink3: string;
  sheet: string;
  paper: string;
  edge: string;
  hair: string;
  ref: string;
}

export function readInkTokens(element: Element): InkTokens {
  const style = getComputedStyle(element);
  const read = (name: string): string => style.getPropertyValue(name).trim();
  return {
    ink: read('--ink'),
    ink3: read('--ink-3'),
    sheet: read('--sheet'),
    paper: read('--paper'),
    edge: read('--edge'),
    hair: read('--hair'),
    ref: read('--ref'),
  };
}

/** Calls back when the theme of the page changes; returns the way to stop. */
export function onThemeChange(root: Element, callback: () => void): () => void {
  const observer = new MutationObserver(callback);
  observer.observe(root, { attributes: true, attributeFilter: ['data-theme', 'class'] });
  return () => observer.disconnect();
}

/** Diagonal hatch for a canvas, the same 7 px pitch as the drawn pattern. */
export function hatchPattern(context: CanvasRenderingContext2D, colour: string, ratio: number): CanvasPattern | null {
  const size = Math.max(4, Math.round(10 * ratio));
  const tile = document.createElement('canvas');
  tile.width = size;
  tile.height = size;
  const pen = tile.getContext('2d');
  if (!pen) return null;
  pen.strokeStyle = colour;
  pen.globalAlpha = 0.75;
  pen.lineWidth = ratio;
  pen.beginPath();
  for (const offset of [-size, 0, size]) {
    pen.moveTo(offset - 1, size + 1);
    pen.lineTo(offset + size + 1, -1);
  }
  pen.stroke();
  return context.createPattern(tile, 'repeat');
}
