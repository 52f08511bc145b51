/**
 * Turns tokens.css into the custom properties that Vuetify's components read, as static CSS. Vuetify's own theme
 * is switched off, so that nothing injects a style element at run time (content security policy) and a change of
 * `data-theme` repaints at once. `vuetify-theme.css` holds the output; a test keeps the two together.
 */
export type TokenTable = Readonly<Record<string, string>>;

/** Vuetify colour name → token. */
const COLOURS: Readonly<Record<string, string>> = {
  background: 'paper',
  'on-background': 'ink',
  surface: 'sheet',
  'on-surface': 'ink',
  'surface-bright': 'sheet',
  'on-surface-bright': 'ink',
  'surface-light': 'shade',
  'on-surface-light': 'ink',
  'surface-variant': 'shade',
  'on-surface-variant': 'ink',
  primary: 'ink',
  'on-primary': 'on-ink',
  secondary: 'ink-2',
  'on-secondary': 'on-ink',
  error: 'not',
  'on-error': 'on-ink',
  warning: 'near',
  'on-warning': 'on-ink',
  success: 'met',
  'on-success': 'on-ink',
  info: 'info',
  'on-info': 'on-ink',
  dead: 'dead',
  'on-dead': 'on-ink',
  live: 'live',
  'on-live': 'on-ink',
  edge: 'edge',
  'on-edge': 'on-ink',
};

const VARIABLES: Readonly<Record<string, string>> = {
  'border-opacity': '1',
  'high-emphasis-opacity': '1',
  'medium-emphasis-opacity': '1',
  'disabled-opacity': '1',
  'idle-opacity': '0.04',
  'hover-opacity': '0.06',
  'focus-opacity': '0',
  'selected-opacity': '0.08',
  'activated-opacity': '0.12',
  'pressed-opacity': '0.12',
  'dragged-opacity': '0.08',
  'highlight-opacity': '0.08',
  'elevation-overlay-opacity-step': '0%',
  'elevation-overlay-color': 'transparent',
  'shadow-key-opacity': '0',
  'shadow-ambient-opacity': '0',
  'theme-overlay-multiplier': '1',
};

/** The tokens of one theme; the dark block only overrides, so it is laid over the light one. */
export function readTokens(css: string, theme: 'light' | 'dark'): TokenTable {
  const block = (selector: RegExp): Record<string, string> => {
    const body = selector.exec(css)?.[1] ?? '';
    const found: Record<string, string> = {};
    for (const [, name, value] of body.matchAll(/--([\w-]+):\s*(#[0-9a-fA-F]{6})\b/g)) found[name!] = value!;
    return found;
  };
  const light = block(/:root,\s*\[data-theme=['"]light['"]\]\s*\{([\s\S]*?)\n\}/);
  return theme === 'light' ? light : { ...light, ...block(/\[data-theme=['"]dark['"]\]\s*\{([\s\S]*?)\n\}/) };
}

function triple(hex: string): string {
  return [1, 3, 5].map((at) => Number.parseInt(hex.slice(at, at + 2), 16)).join(', ');
}

function rules(tokens: TokenTable): string {
  const lines = Object.entries(COLOURS).map(([name, token]) => {
    const hex = tokens[token];
    if (hex === undefined) throw new Error(`tokens.css has no colour --${token}`);
    return `  --v-theme-${name}: ${triple(hex)};`;
  });
  return [
    ...lines,
    `  --v-border-color: ${triple(tokens['edge']!)};`,
    `  --v-shadow-color: ${triple(tokens['ink']!)};`,
  ].join('\n');
}

export function vuetifyThemeCss(tokensCss: string): string {
  const fixed = Object.entries(VARIABLES).map(([name, value]) => `  --v-${name}: ${value};`);
  const text = ['error', 'warning', 'success', 'info', 'dead', 'live', 'secondary'].map(
    (name) => `.text-${name} {\n  color: var(--${COLOURS[name]});\n}`,
  );
  return [
    '/* Generated from tokens.css by vuetify-theme.ts; do not edit. */',
    `:root {\n${fixed.join('\n')}\n}`,
    `:root,\n[data-theme='light'] {\n${rules(readTokens(tokensCss, 'light'))}\n}`,
    `[data-theme='dark'] {\n${rules(readTokens(tokensCss, 'dark'))}\n}`,
    ...text,
    '',
  ].join('\n');
}
