import { readFileSync, writeFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { readTokens, vuetifyThemeCss } from '../../../src/styles/vuetify-theme.ts';

const at = (name: string): URL => new URL(`../../../src/styles/${name}`, import.meta.url);
const tokens = readFileSync(at('tokens.css'), 'utf8');

/** Relative luminance and contrast ratio of WCAG 2.2. */
function luminance(hex: string): number {
  const [r, g, b] = [1, 3, 5].map((i) => {
    const c = Number.parseInt(hex.slice(i, i + 2), 16) / 255;
    return c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4;
  });
  return 0.2126 * r! + 0.7152 * g! + 0.0722 * b!;
}
function contrast(a: string, b: string): number {
  const [high, low] = [luminance(a), luminance(b)].sort((x, y) => y - x);
  return (high! + 0.05) / (low! + 0.05);
}

describe('theme', () => {
  it('keeps the generated sheet equal to what the tokens give (SIDEWASH_REGENERATE=1 writes it anew)', () => {
    const wanted = vuetifyThemeCss(tokens);
    if (process.env['SIDEWASH_REGENERATE'] === '1') writeFileSync(at('vuetify-theme.css'), wanted);
    expect(readFileSync(at('vuetify-theme.css'), 'utf8')).toBe(wanted);
  });

  it('refuses tokens that lack a colour it needs', () => {
    expect(() => vuetifyThemeCss(tokens.replaceAll('--near:', '--nearly:'))).toThrow('--near');
  });

  // 4.5:1 for text and 3:1 for frames: WCAG 2.2, success criteria 1.4.3 and 1.4.11.
  it.each(['light', 'dark'] as const)('reads and stands out on every ground of the %s sheet', (theme) => {
    const colour = readTokens(tokens, theme);
    for (const ground of ['paper', 'sheet', 'shade']) {
      for (const text of ['ink', 'ink-2', 'ink-3', 'met', 'near', 'not', 'dead', 'live']) {
        expect(contrast(colour[text]!, colour[ground]!), `${text} on ${ground}`).toBeGreaterThanOrEqual(4.5);
      }
      expect(contrast(colour['edge']!, colour[ground]!), `edge on ${ground}`).toBeGreaterThanOrEqual(3);
    }
    expect(contrast(colour['on-ink']!, colour['ink']!)).toBeGreaterThanOrEqual(4.5);
  });
});
