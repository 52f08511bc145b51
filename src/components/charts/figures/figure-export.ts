/** Saves a figure as SVG, PNG or CSV: styles are resolved into the copy so that it stands alone. */
import Papa from 'papaparse';
import type { FigureTable } from './plot-types.ts';

const COPIED = [
  'fill',
  'stroke',
  'stroke-width',
  'stroke-dasharray',
  'stroke-linejoin',
  'opacity',
  'font',
  'font-family',
  'font-size',
  'font-weight',
  'text-anchor',
  'paint-order',
] as const;

/** A copy of the SVG with computed styles written out and the shared textures inside it. */
export function standaloneSvg(svg: SVGSVGElement, background: string): string {
  const copy = svg.cloneNode(true) as SVGSVGElement; // cloneNode keeps the element's class
  const sources = svg.querySelectorAll('*');
  const targets = copy.querySelectorAll('*');
  sources.forEach((source, i) => {
    const style = getComputedStyle(source);
    const target = targets[i];
    if (!target) return;
    for (const name of COPIED) {
      const value = style.getPropertyValue(name);
      if (value) target.setAttribute(name, value);
    }
  });
  const box = svg.getBoundingClientRect();
  copy.setAttribute('xmlns', 'http://www.w3.org/2000/svg');
  copy.setAttribute('width', String(Math.round(box.width)));
  copy.setAttribute('height', String(Math.round(box.height)));
  const patterns = document.querySelector('.ink-patterns defs')?.cloneNode(true);
  if (patterns instanceof Element) {
    const root = getComputedStyle(document.documentElement);
    const text = patterns.innerHTML.replace(/var\((--[\w-]+)\)/g, (_, name: string) =>
      root.getPropertyValue(name).trim(),
    );
    patterns.innerHTML = text;
    copy.prepend(patterns);
  }
  const ground = document.createElementNS('http://www.w3.org/2000/svg', 'rect');
  ground.setAttribute('width', '100%');
  ground.setAttribute('height', '100%');
  ground.setAttribute('fill', background);
  copy.prepend(ground);
  return new XMLSerializer().serializeToString(copy);
}

/** PNG of a stand-alone SVG at twice its size. */
export async function svgToPng(markup: string, width: number, height: number): Promise<Blob> {
  const image = new Image();
  const address = URL.createObjectURL(new Blob([markup], { type: 'image/svg+xml' }));
  try {
    image.src = address;
    await image.decode();
    const canvas = document.createElement('canvas');
    canvas.width = width * 2;
    canvas.height = height * 2;
    const context = canvas.getContext('2d');
    if (!context) throw new Error('This browser gave no drawing surface for the picture. Save as SVG instead.');
    context.drawImage(image, 0, 0, canvas.width, canvas.height);
    return await new Promise((resolve, reject) => {
      canvas.toBlob(
        (blob) => (blob ? resolve(blob) : reject(new Error('The picture could not be encoded.'))),
        'image/png',
      );
    });
  } finally {
    URL.revokeObjectURL(address);
  }
}

/** RFC 4180 text of a table; cells that a spreadsheet would run as a formula are made harmless. */
export function tableToCsv(table: FigureTable): string {
  return `${Papa.unparse([table.head, ...table.rows] as (string | number | null)[][], { escapeFormulae: true, newline: '\r\n' })}\r\n`; // papaparse wants mutable rows
}

/** Hands a file to the browser's download. */
export function saveFile(name: string, data: Blob | string, type = 'text/plain'): void {
  const blob = typeof data === 'string' ? new Blob([data], { type }) : data;
  const address = URL.createObjectURL(blob);
  const link = document.createElement('a');
  link.href = address;
  link.download = name;
  link.click();
  setTimeout(() => URL.revokeObjectURL(address), 10_000);
}
