import type PDFDocument from 'pdfkit';
import { z } from 'zod';
import { fontFiles, fontOf, type Face } from './sheet-fonts.ts';

type Doc = InstanceType<typeof PDFDocument>;

/** What we read of the embedded font object: whether it has a glyph. */
interface GlyphSource {
  hasGlyphForCodePoint(code: number): boolean;
}
const glyphSource = z.object({
  font: z.custom<GlyphSource>(
    (value) => typeof value === 'object' && value !== null && 'hasGlyphForCodePoint' in value,
  ),
});

export interface TextStyle {
  face?: Face;
  size?: number;
  colour?: string;
  align?: 'left' | 'right' | 'centre';
}

/** Signs that no shipped face has, in words that it has. */
const SPOKEN: Readonly<Record<string, string>> = { '≥': 'min', '≤': 'max', '−': '-', '→': 'to', '⚠': '!' };

/** Draws and measures text whose characters may come from several embedded faces. */
export class SheetText {
  private readonly names: Record<Face, string[]>;
  private readonly covers = new Map<string, (code: number) => boolean>();

  constructor(private readonly doc: Doc) {
    const files = fontFiles();
    const register = (face: Face): string[] =>
      files[face].map((file, i) => {
        const name = `${face}-${i}`;
        doc.registerFont(name, fontOf(file));
        return name;
      });
    this.names = {
      text: register('text'),
      bold: register('bold'),
      mono: register('mono'),
      monoBold: register('monoBold'),
    };
  }

  private has(name: string, code: number): boolean {
    let test = this.covers.get(name);
    if (!test) {
      this.doc.font(name);
      const parsed = glyphSource.safeParse(Reflect.get(this.doc, '_font'));
      const source = parsed.success ? parsed.data.font : null;
      test = source ? (c) => source.hasGlyphForCodePoint(c) : () => true;
      this.covers.set(name, test);
    }
    return test(code);
  }

  private runs(text: string, face: Face): { name: string; text: string }[] {
    const out: { name: string; text: string }[] = [];
    for (const given of text) {
      for (const char of SPOKEN[given] ?? given) {
        const code = char.codePointAt(0) ?? 32;
        const name = this.names[face].find((n) => this.has(n, code));
        const drawn = name ? char : '?';
        const used = name ?? this.names[face][0] ?? 'Helvetica';
        const last = out.at(-1);
        if (last && last.name === used) last.text += drawn;
        else out.push({ name: used, text: drawn });
      }
    }
    return out;
  }

  width(text: string, style: TextStyle = {}): number {
    this.doc.fontSize(style.size ?? 9);
    return this.runs(text, style.face ?? 'text').reduce(
      (sum, run) => sum + this.doc.font(run.name).widthOfString(run.text),
      0,
    );
  }

  /** One line with its baseline box top at y. `width` shortens with an ellipsis and places right or centred text. */
  line(text: string, x: number, y: number, style: TextStyle = {}, width?: number): void {
    const size = style.size ?? 9;
    let shown = text;
    if (width !== undefined && this.width(shown, style) > width) {
      while (shown.length > 1 && this.width(`${shown}…`, style) > width) shown = shown.slice(0, -1);
      shown = `${shown}…`;
    }
    const total = this.width(shown, style);
    let at = x;
    if (style.align === 'right') at = x + (width ?? 0) - total;
    else if (style.align === 'centre') at = x + ((width ?? 0) - total) / 2;
    this.doc.fontSize(size).fillColor(style.colour ?? '#000');
    for (const run of this.runs(shown, style.face ?? 'text')) {
      this.doc.font(run.name).text(run.text, at, y, { lineBreak: false });
      at += this.doc.widthOfString(run.text);
    }
  }

  /** Lines of a paragraph broken at spaces to `width`; a word longer than the line is cut. */
  wrap(text: string, width: number, style: TextStyle = {}): string[] {
    const lines: string[] = [];
    for (const part of text.split('\n')) {
      let line = '';
      for (let word of part.split(/\s+/)) {
        while (this.width(word, style) > width) {
          let cut = word.length - 1;
          while (cut > 1 && this.width(word.slice(0, cut), style) > width) cut--;
          if (line) lines.push(line);
          lines.push(word.slice(0, cut));
          word = word.slice(cut);
          line = '';
        }
        const next = line ? `${line} ${word}` : word;
        if (line && this.width(next, style) > width) {
          lines.push(line);
          line = word;
        } else line = next;
      }
      lines.push(line);
    }
    return lines;
  }
}
