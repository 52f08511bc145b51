import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { dirname, join } from 'node:path';
import { unpackWoff } from './unpack-woff.ts';

const require = createRequire(import.meta.url);

export type Face = 'text' | 'bold' | 'mono' | 'monoBold';

function folder(packageName: string): string {
  return join(dirname(require.resolve(`${packageName}/package.json`)), 'files');
}

const unpacked = new Map<string, Buffer>();

/** The font of a file, unpacked once in the life of the process. */
export function fontOf(file: string): Buffer {
  const font = unpacked.get(file) ?? unpackWoff(readFileSync(file));
  unpacked.set(file, font);
  return font;
}

/** Files tried in turn for a character, per face: the face itself, then its wider subsets. */
export function fontFiles(): Record<Face, readonly string[]> {
  const text = folder('@fontsource/radio-canada');
  const mono = folder('@fontsource/jetbrains-mono');
  const chain = (weight: 400 | 600, first: 'text' | 'mono'): string[] => {
    const t = ['latin', 'latin-ext'].map((s) => join(text, `radio-canada-${s}-${weight}-normal.woff`));
    const m = ['latin', 'latin-ext', 'greek', 'cyrillic'].map((s) =>
      join(mono, `jetbrains-mono-${s}-${weight}-normal.woff`),
    );
    return first === 'text' ? [...t, ...m] : [...m, ...t];
  };
  return { text: chain(400, 'text'), bold: chain(600, 'text'), mono: chain(400, 'mono'), monoBold: chain(600, 'mono') };
}
