/** Colours of the stage, read from the theme's CSS variables; screen values 0 … 1, never converted. */

export interface Rgb {
  readonly r: number;
  readonly g: number;
  readonly b: number;
}

const VARIABLES = {
  sky: '--stage-sky',
  ground: '--stage-ground',
  grid: '--stage-grid',
  ink: '--ink',
  ink2: '--ink-2',
  ink3: '--ink-3',
  onInk: '--on-ink',
  dead: '--dead',
  live: '--live',
  reference: '--ref',
  tone0: '--tone-0',
  tone1: '--tone-1',
  tone2: '--tone-2',
  tone3: '--tone-3',
  tone4: '--tone-4',
  R: '--f-rudder',
  F: '--f-fin',
  Y: '--f-side',
  LL: '--f-lift-l',
  LR: '--f-lift-r',
  T: '--f-thrust',
  D: '--f-drag',
  W: '--f-weight',
  N: '--m-yaw',
  L: '--m-roll',
} as const;

export type PaletteName = keyof typeof VARIABLES;

export interface StagePalette {
  /** Text for 2-D drawing. */
  readonly css: Readonly<Record<PaletteName, string>>;
  readonly rgb: Readonly<Record<PaletteName, Rgb>>;
  /** Six paper tones, lightest first: the five of the theme and the middle of the last two. */
  readonly tones: readonly Rgb[];
  /** The dark line round facets: the darker of ink and its opposite, so that it stays dark at night. */
  readonly edge: Rgb;
  readonly monoFont: string;
}

/** Reads the palette as it applies to an element. Throws when a variable is missing or is not a colour. */
export function readPalette(element: Element): StagePalette {
  const style = getComputedStyle(element);
  const css: Partial<Record<PaletteName, string>> = {};
  const rgb: Partial<Record<PaletteName, Rgb>> = {};
  for (const name of Object.keys(VARIABLES) as PaletteName[]) {
    const text = style.getPropertyValue(VARIABLES[name]).trim();
    css[name] = text;
    rgb[name] = parseColour(text, VARIABLES[name]);
  }
  // every name of VARIABLES was filled in the loop above
  const all = rgb as Record<PaletteName, Rgb>;
  return {
    css: css as Record<PaletteName, string>,
    rgb: all,
    tones: [all.tone0, all.tone1, all.tone2, all.tone3, between(all.tone3, all.tone4, 0.5), all.tone4],
    edge: luminance(all.ink) < luminance(all.onInk) ? all.ink : all.onInk,
    monoFont: style.getPropertyValue('--mono').trim() || 'monospace',
  };
}

/** Screen colour of `#rgb`, `#rrggbb` or `rgb(…)`. */
export function parseColour(text: string, name: string): Rgb {
  const hex = /^#([0-9a-f]{3}|[0-9a-f]{6})$/i.exec(text);
  if (hex !== null) {
    const digits = hex[1].length === 3 ? hex[1].replace(/./g, '$&$&') : hex[1];
    const value = Number.parseInt(digits, 16);
    return { r: (value >> 16) / 255, g: ((value >> 8) & 255) / 255, b: (value & 255) / 255 };
  }
  const parts = /^rgba?\(\s*([\d.]+)[\s,]+([\d.]+)[\s,]+([\d.]+)/.exec(text);
  if (parts !== null) return { r: Number(parts[1]) / 255, g: Number(parts[2]) / 255, b: Number(parts[3]) / 255 };
  throw new Error(`The theme gives no colour for ${name}: "${text}".`);
}

/** Colour between two, 0 the first, 1 the second. */
export function between(a: Rgb, b: Rgb, t: number): Rgb {
  return { r: a.r + (b.r - a.r) * t, g: a.g + (b.g - a.g) * t, b: a.b + (b.b - a.b) * t };
}

const luminance = (colour: Rgb): number => 0.2126 * colour.r + 0.7152 * colour.g + 0.0722 * colour.b;
