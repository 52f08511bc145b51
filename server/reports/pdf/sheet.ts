import PDFDocument from 'pdfkit';
import { SheetText, type TextStyle } from './sheet-text.ts';

/** The sentence that every sheet with a speed or a limit carries at its foot. */
export const CAUTION = 'Not an approved training device, not for operational use.';
export const CAUTION_REST = 'The approved flight manual and licensed instruction govern.';

export interface SheetHead {
  organisation: string;
  kind: string;
  number: string;
  title: string;
  subtitle: string;
  /** Left end of the foot: revisions, digest, program version. */
  trace: string;
  /** Time of printing in words; passed in, because reports have no clock. */
  printed: string;
  /** Words of the organisation below the fixed caution; empty for none. */
  caution?: string;
}
export type ResultState = 'met' | 'near' | 'not-met' | 'not-reached';
export interface SheetColumn {
  head: string;
  /** Share of the sheet width. */
  share: number;
  align?: 'left' | 'right';
  mono?: boolean;
  bold?: boolean;
}
export interface MarginBar {
  /** 0 … 1 along the bar. */
  value: number;
  limit: number;
  forbid: 'above' | 'below';
}
export type SheetCell = string | { state: ResultState; text: string } | { bar: MarginBar };

const LEFT = 40;
const WIDTH = 515;
const TOP = 30;
const FOOT = 778;
const ADDED_LINE = 10;
const MARK = [
  'M2,5 H12.5 L13.4,9 H2 Z M2,16 H14.6 L15.2,20 H2 Z M2,27 H15.6 V31 H2 Z',
  'M26.2,10.5 H38 V14.5 H26 L26,14.5 Z M25.4,21.5 H38 V25.5 H25 Z M24.6,32.5 H38 V36.5 H23.6 Z',
  'M16.4,2 H20 C22.6,12 22.9,24 20.4,38 C18.6,31 18.4,14 16.4,2 Z',
];

/**
 * An A4 sheet in the house style: black on white, textures and words in place of colour, sections that never split.
 * Lengths are points; y runs down the page.
 */
export class Sheet {
  readonly doc: InstanceType<typeof PDFDocument>;
  readonly text: SheetText;
  readonly left = LEFT;
  readonly width = WIDTH;
  y = TOP;
  private readonly parts: Buffer[] = [];
  private readonly done: Promise<Buffer>;
  /** Where the foot begins; higher on the page when the organisation adds to the caution. */
  private readonly foot: number;
  private readonly addition: readonly string[];

  constructor(private readonly head: SheetHead) {
    this.doc = new PDFDocument({
      size: 'A4',
      margin: 0,
      bufferPages: true,
      autoFirstPage: false,
      info: { Title: head.title, Author: head.organisation, Subject: head.kind, Creator: 'Sidewash' },
      lang: 'en',
    });
    this.text = new SheetText(this.doc);
    this.addition = head.caution ? this.text.wrap(head.caution, WIDTH, { size: 8 }) : [];
    this.foot = FOOT - this.addition.length * ADDED_LINE;
    this.done = new Promise((resolve, reject) => {
      this.doc.on('data', (part: Buffer) => this.parts.push(part));
      this.doc.on('end', () => resolve(Buffer.concat(this.parts)));
      this.doc.on('error', reject);
    });
    this.newPage();
    this.text.line(head.title, LEFT, this.y, { face: 'bold', size: 16 }, WIDTH);
    this.y += 21;
    for (const line of this.text.wrap(head.subtitle, WIDTH, { size: 8.5 })) {
      this.text.line(line, LEFT, this.y, { size: 8.5, colour: '#333' });
      this.y += 11;
    }
    this.y += 4;
  }

  private newPage(): void {
    this.doc.addPage();
    this.y = TOP;
    this.doc
      .save()
      .translate(LEFT, this.y - 3)
      .scale(0.45)
      .fillColor('#000');
    for (const path of MARK) this.doc.path(path).fill();
    this.doc.restore();
    this.text.line('Sidewash', LEFT + 22, this.y - 1, { face: 'bold', size: 12 });
    const box = this.text.width(this.head.number, { face: 'monoBold', size: 9 }) + 14;
    this.doc
      .lineWidth(1)
      .rect(LEFT + WIDTH - box, this.y - 4, box, 20)
      .stroke('#000');
    this.text.line(this.head.number, LEFT + WIDTH - box + 7, this.y, { face: 'monoBold', size: 9 });
    const x = LEFT + WIDTH - box - 208;
    this.text.line(this.head.organisation, x, this.y - 4, { size: 8, align: 'right' }, 200);
    this.text.line(this.head.kind, x, this.y + 6, { size: 8, align: 'right' }, 200);
    this.y += 22;
    this.rule(1.5);
    this.y += 9;
  }

  rule(weight = 0.75): void {
    this.doc
      .lineWidth(weight)
      .moveTo(LEFT, this.y)
      .lineTo(LEFT + WIDTH, this.y)
      .stroke('#000');
  }

  /** Starts a new page unless `height` points are left; sections call it so that they never split. */
  need(height: number): void {
    if (this.y + height > this.foot - 8) this.newPage();
  }

  /** Row of boxed inputs: a caption and a value each. */
  boxes(items: readonly { label: string; value: string; mono?: boolean; state?: ResultState }[]): void {
    this.need(40);
    const w = WIDTH / Math.max(1, items.length);
    this.doc.lineWidth(1).rect(LEFT, this.y, WIDTH, 33).stroke('#000');
    items.forEach((item, i) => {
      const x = LEFT + i * w;
      if (i > 0)
        this.doc
          .lineWidth(0.75)
          .moveTo(x, this.y)
          .lineTo(x, this.y + 33)
          .stroke('#000');
      this.text.line(item.label, x + 6, this.y + 5, { size: 7.5, colour: '#333' }, w - 12);
      let inset = 6;
      if (item.state) {
        this.glyph(item.state, x + 6, this.y + 18);
        inset = 19;
      }
      this.text.line(
        item.value,
        x + inset,
        this.y + 17,
        { face: item.mono ? 'monoBold' : 'bold', size: 9.5 },
        w - inset - 4,
      );
    });
    this.y += 40;
  }

  /** Numbered head of a section that needs `height` points below it. */
  section(number: number | string, title: string, aside = '', height = 60): void {
    this.need(height + 28);
    this.rule(0.75);
    this.y += 5;
    this.sectionHead(number, title, LEFT, WIDTH, aside);
    this.y += 19;
  }

  /** The head alone, for sections side by side. */
  sectionHead(number: number | string, title: string, x: number, width: number, aside = ''): void {
    const box = this.text.width(String(number), { face: 'monoBold', size: 8 }) + 9;
    this.doc.lineWidth(1).rect(x, this.y, box, 13).stroke('#000');
    this.text.line(String(number), x + 4.5, this.y + 1.5, { face: 'monoBold', size: 8 });
    this.text.line(title, x + box + 7, this.y + 0.5, { face: 'bold', size: 10 });
    const taken = box + 14 + this.text.width(title, { face: 'bold', size: 10 });
    if (aside) this.text.line(aside, x + taken, this.y + 1, { size: 8, colour: '#333', align: 'right' }, width - taken);
  }

  paragraph(content: string, style: TextStyle = {}): void {
    const size = style.size ?? 9;
    for (const line of this.text.wrap(content, WIDTH, { ...style, size })) {
      this.need(size * 1.4);
      this.text.line(line, LEFT, this.y, { ...style, size });
      this.y += size * 1.4;
    }
    this.y += 3;
  }

  table(columns: readonly SheetColumn[], rows: readonly (readonly SheetCell[])[]): void {
    const widths = columns.map((c) => c.share * WIDTH);
    const header = (): void => {
      let x = LEFT;
      columns.forEach((c, i) => {
        const w = widths[i] ?? 0;
        this.text.line(c.head, x + 4, this.y, { face: 'bold', size: 8, align: c.align ?? 'left' }, w - 8);
        x += w;
      });
      this.y += 13;
      this.doc
        .lineWidth(1)
        .moveTo(LEFT, this.y)
        .lineTo(LEFT + WIDTH, this.y)
        .stroke('#000');
      this.y += 3;
    };
    this.need(40);
    header();
    for (const row of rows) {
      if (this.y + 17 > this.foot - 8) {
        this.newPage();
        header();
      }
      let x = LEFT;
      row.forEach((cell, i) => {
        const c = columns[i];
        const w = widths[i] ?? 0;
        if (!c) return;
        if (typeof cell === 'string') {
          const face = c.mono ? (c.bold ? 'monoBold' : 'mono') : c.bold ? 'bold' : 'text';
          this.text.line(cell, x + 4, this.y + 1, { face, size: 8.5, align: c.align ?? 'left' }, w - 8);
        } else if ('state' in cell) {
          this.glyph(cell.state, x + 4, this.y + 1.5);
          this.text.line(cell.text, x + 17, this.y + 1, { face: 'bold', size: 8.5 }, w - 20);
        } else this.marginBar(cell.bar, x + 4, this.y + 2, w - 8);
        x += w;
      });
      this.y += 14;
      this.doc
        .lineWidth(0.5)
        .moveTo(LEFT, this.y)
        .lineTo(LEFT + WIDTH, this.y)
        .stroke('#999');
      this.y += 3;
    }
    this.y += 4;
  }

  /** Disc met, half disc close, crossed square not met, dashed ring not reached. */
  glyph(state: ResultState, x: number, y: number): void {
    const d = this.doc;
    const c = 4.5;
    d.save().translate(x, y).lineWidth(1);
    if (state === 'met') {
      d.circle(c, c, c).fill('#000');
      d.lineWidth(1.3).moveTo(2.4, 4.7).lineTo(4, 6.2).lineTo(6.8, 2.9).stroke('#fff');
    } else if (state === 'near') {
      d.circle(c, c, c - 0.6).stroke('#000');
      d.path(`M${c} 0.6 A${c - 0.6} ${c - 0.6} 0 0 1 ${c} ${2 * c - 0.6} Z`).fill('#000');
    } else if (state === 'not-met') {
      d.rect(0, 0, 9, 9).fill('#000');
      d.lineWidth(1.3).moveTo(2.4, 2.4).lineTo(6.6, 6.6).moveTo(6.6, 2.4).lineTo(2.4, 6.6).stroke('#fff');
    } else
      d.dash(1.6, { space: 1.4 })
        .circle(c, c, c - 0.6)
        .stroke('#000')
        .undash();
    d.restore();
  }

  marginBar(bar: MarginBar, x: number, y: number, width: number): void {
    const d = this.doc;
    const at = (v: number): number => x + Math.min(1, Math.max(0, v)) * width;
    if (bar.forbid === 'above') this.hatch(at(bar.limit), y, x + width - at(bar.limit), 9);
    else this.hatch(x, y, at(bar.limit) - x, 9);
    d.lineWidth(0.75).rect(x, y, width, 9).stroke('#000');
    d.rect(x, y + 2.5, Math.max(0.5, at(bar.value) - x), 4).fill('#000');
    d.lineWidth(1.4)
      .moveTo(at(bar.limit), y - 1)
      .lineTo(at(bar.limit), y + 10)
      .stroke('#000');
  }

  /** Grey diagonal hatch: what is not available. */
  hatch(x: number, y: number, width: number, height: number, pitch = 5): void {
    if (width <= 0 || height <= 0) return;
    const d = this.doc;
    d.save().rect(x, y, width, height).clip().lineWidth(0.5);
    for (let k = -height; k < width; k += pitch) d.moveTo(x + k, y + height).lineTo(x + k + height, y);
    d.stroke('#555').restore();
  }

  /** Lines to sign on. */
  signatures(names: readonly string[]): void {
    this.need(46);
    this.y += 24;
    const w = (WIDTH - 16 * (names.length - 1)) / Math.max(1, names.length);
    names.forEach((name, i) => {
      const x = LEFT + i * (w + 16);
      this.doc
        .lineWidth(0.75)
        .moveTo(x, this.y)
        .lineTo(x + w, this.y)
        .stroke('#000');
      this.text.line(name, x, this.y + 4, { size: 8 }, w);
    });
    this.y += 20;
  }

  /** Writes the feet and gives the file. */
  async finish(): Promise<Buffer> {
    const range = this.doc.bufferedPageRange();
    for (let i = 0; i < range.count; i++) {
      this.doc.switchToPage(range.start + i);
      this.doc
        .lineWidth(0.75)
        .moveTo(LEFT, this.foot)
        .lineTo(LEFT + WIDTH, this.foot)
        .stroke('#000');
      this.text.line(CAUTION, LEFT, this.foot + 6, { face: 'bold', size: 8 });
      this.text.line(CAUTION_REST, LEFT + this.text.width(`${CAUTION} `, { face: 'bold', size: 8 }), this.foot + 6, {
        size: 8,
      });
      this.addition.forEach((line, n) => {
        this.text.line(line, LEFT, this.foot + 17 + n * ADDED_LINE, { size: 8 });
      });
      this.text.line(this.head.trace, LEFT, FOOT + 20, { face: 'mono', size: 7.5, colour: '#333' }, 340);
      this.text.line(
        `printed ${this.head.printed} · ${i + 1} of ${range.count}`,
        LEFT,
        FOOT + 20,
        { size: 7.5, align: 'right' },
        WIDTH,
      );
    }
    this.doc.end();
    return this.done;
  }
}
