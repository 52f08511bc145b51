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

export interface StandalonePicture {
  markup: string;
  /** CSS pixels. */
  width: number;
  height: number;
}

/** Every picture that leaves the screen carries it, as the screen does. */
const CAUTION = [
  'Not an approved training device, not for operational use.',
  'The approved flight manual and licensed instruction govern.',
];
const HEAD = 24;
const FOOT = 34;

/**
 * One SVG of several drawings, each where it stands on the page, with styles written out and the shared textures inside;
 * the title above, the caution beneath.
 */
export function standaloneSvg(
  drawings: readonly SVGSVGElement[],
  background: string,
  title: string,
): StandalonePicture {
  const boxes = drawings.map((svg) => svg.getBoundingClientRect());
  const left = Math.min(...boxes.map((box) => box.left));
  const top = Math.min(...boxes.map((box) => box.top));
  const width = Math.round(Math.max(...boxes.map((box) => box.right)) - left);
  const height = Math.round(Math.max(...boxes.map((box) => box.bottom)) - top) + HEAD + FOOT;
  const whole = document.createElementNS(SVG, 'svg');
  whole.setAttribute('xmlns', SVG);
  setBox(whole, width, height);
  const ground = document.createElementNS(SVG, 'rect');
  setBox(ground, width, height);
  ground.setAttribute('fill', background);
  whole.append(ground);
  const patterns = document.querySelector('.ink-patterns defs')?.cloneNode(true);
  if (patterns instanceof Element) {
    const root = getComputedStyle(document.documentElement);
    const text = patterns.innerHTML.replace(/var\((--[\w-]+)\)/g, (_, name: string) =>
      root.getPropertyValue(name).trim(),
    );
    patterns.innerHTML = text;
    whole.append(patterns);
  }
  drawings.forEach((svg, i) => {
    const box = boxes[i];
    if (!box) return;
    const copy = withStyles(svg);
    copy.setAttribute('x', String(Math.round(box.left - left)));
    copy.setAttribute('y', String(Math.round(box.top - top) + HEAD));
    setBox(copy, Math.round(box.width), Math.round(box.height));
    whole.append(copy);
  });
  const ink = getComputedStyle(document.documentElement).getPropertyValue('--ink').trim();
  whole.append(textLine(title, 16, 13, ink));
  CAUTION.forEach((line, i) => whole.append(textLine(line, height - 20 + i * 14, 11, ink)));
  return { markup: new XMLSerializer().serializeToString(whole), width, height };
}

const SVG = 'http://www.w3.org/2000/svg';
function textLine(content: string, y: number, size: number, ink: string): SVGTextElement {
  const text = document.createElementNS(SVG, 'text');
  text.setAttribute('x', '6');
  text.setAttribute('y', String(y));
  text.setAttribute('font-family', 'sans-serif');
  text.setAttribute('font-size', String(size));
  text.setAttribute('font-weight', size > 12 ? '700' : '400');
  text.setAttribute('fill', ink);
  text.textContent = content;
  return text;
}
function setBox(element: Element, width: number, height: number): void {
  element.setAttribute('width', String(width));
  element.setAttribute('height', String(height));
}

/** A copy of one drawing with its computed styles as attributes. */
function withStyles(svg: SVGSVGElement): SVGSVGElement {
  const copy = svg.cloneNode(true) as SVGSVGElement; // cloneNode keeps the element's class
  const targets = copy.querySelectorAll('*');
  svg.querySelectorAll('*').forEach((source, i) => {
    const style = getComputedStyle(source);
    const target = targets[i];
    if (!target) return;
    for (const name of COPIED) {
      const value = style.getPropertyValue(name);
      if (value) target.setAttribute(name, value);
    }
    target.removeAttribute('class');
  });
  return copy;
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
