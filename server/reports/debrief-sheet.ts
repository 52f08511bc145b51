import { drawPlot, roundTicks } from './pdf/sheet-plots.ts';
import { Sheet, type ResultState } from './pdf/sheet.ts';

/** Everything a debrief sheet shows, as plain data in display units. */
export interface DebriefSheetData {
  organisation: string;
  number: string;
  title: string;
  subtitle: string;
  trace: string;
  printed: string;
  /** Words of the organisation below the fixed caution. */
  caution: string;
  trainee: string;
  flownOn: string;
  attempt: string;
  passed: boolean;
  notMet: number;
  criteriaCount: number;
  agrees: boolean;
  zeroS: number;
  durationS: number;
  firstPedalS: number | null;
  arrestedS: number | null;
  deadWords: string;
  events: readonly { letter: string; text: string; timeS: number }[];
  strip: readonly {
    timeS: number;
    nose: number;
    ball: number;
    pedal: number;
    bankDeg: number;
    verdict: number;
    deadSide: number;
  }[];
  rows: readonly {
    name: string;
    unit: string;
    timeS: readonly number[];
    values: readonly number[];
    reference: { timeS: readonly number[]; values: readonly number[] } | null;
    limit: number | null;
  }[];
  criteria: readonly {
    title: string;
    limit: string;
    flown: string;
    margin: string;
    state: ResultState;
    word: string;
    bar: { value: number; limit: number; forbid: 'above' | 'below' } | null;
  }[];
  remarks: readonly { at: string; text: string; author: string }[];
  signatures: readonly { kind: string; verdict: string; signer: string; at: string; note: string }[];
}

/** A4 debrief of one attempt: events and reaction, balance, traces, criteria, remarks, signatures. */
export async function debriefSheet(data: DebriefSheetData): Promise<Buffer> {
  const sheet = new Sheet({
    organisation: data.organisation,
    kind: 'Debrief sheet',
    number: data.number,
    title: data.title,
    subtitle: data.subtitle,
    trace: data.trace,
    printed: data.printed,
    caution: data.caution,
  });
  sheet.boxes([
    { label: 'Trainee', value: data.trainee },
    { label: 'Flown', value: data.flownOn, mono: true },
    { label: 'Attempt', value: data.attempt, mono: true },
    {
      label: 'Result',
      value: data.passed ? 'Met' : `Not met, ${data.notMet} of ${data.criteriaCount}`,
      state: data.passed ? 'met' : 'not-met',
    },
  ]);
  timeLine(sheet, data);
  if (data.strip.length > 0) balance(sheet, data);
  traces(sheet, data);
  sheet.section(4, 'Criteria', 'recomputed by the server from the input log', 20 + 17 * data.criteria.length);
  sheet.table(
    [
      { head: 'Criterion', share: 0.31, bold: true },
      { head: 'Limit', share: 0.12, align: 'right', mono: true },
      { head: 'Flown', share: 0.12, align: 'right', mono: true },
      { head: '', share: 0.2 },
      { head: 'Margin', share: 0.12, align: 'right', mono: true },
      { head: 'Result', share: 0.13 },
    ],
    data.criteria.map((c) => [
      c.title,
      c.limit,
      c.flown,
      c.bar ? { bar: c.bar } : '',
      c.margin,
      { state: c.state, text: c.word },
    ]),
  );
  sheet.section(5, 'Remarks', '', 30);
  if (data.remarks.length === 0) sheet.paragraph('None.');
  for (const remark of data.remarks) sheet.paragraph(`${remark.at}  ${remark.text} (${remark.author})`);
  sheet.section(6, 'Signatures', 'the instructor attests who held the controls', 60);
  for (const s of data.signatures) {
    sheet.paragraph(`${s.kind}: ${s.verdict}, ${s.signer}, ${s.at}${s.note ? `. ${s.note}` : ''}`);
  }
  if (data.signatures.length === 0) sheet.signatures(['Instructor', `Trainee, ${data.trainee}`, 'Date']);
  sheet.paragraph(
    data.agrees
      ? 'The server integrated the recorded inputs again; its states agree with those of the flight. Never alternate full rudder: structural limits hold for one input only.'
      : 'The server integrated the recorded inputs again; its states differ from those recorded in flight. The server’s result counts. Never alternate full rudder: structural limits hold for one input only.',
    { size: 8 },
  );
  return sheet.finish();
}

function timeLine(sheet: Sheet, data: DebriefSheetData): void {
  sheet.section(1, 'Events and reaction', 's from the first event; hatched: recognising', 70);
  const d = sheet.doc;
  const left = sheet.left + 8;
  const width = sheet.width - 16;
  const at = (timeS: number): number => left + (timeS / data.durationS) * width;
  const top = sheet.y + 20;
  const part = (from: number, to: number, text: string, fill: 'hatch' | 'grey' | null): void => {
    const x = at(from);
    const w = at(to) - x;
    if (w <= 0) return;
    if (fill === 'hatch') sheet.hatch(x, top, w, 12);
    else if (fill === 'grey') d.rect(x, top, w, 12).fill('#ddd');
    if (sheet.text.width(text, { size: 7 }) < w - 4) sheet.text.line(text, x, top + 2, { size: 7, align: 'centre' }, w);
    d.lineWidth(0.75).rect(x, top, w, 12).stroke('#000');
  };
  const pedal = data.firstPedalS ?? data.durationS;
  const calm = data.arrestedS !== null && data.arrestedS > pedal ? data.arrestedS : pedal;
  part(0, data.zeroS, 'before', null);
  part(
    data.zeroS,
    pedal,
    data.firstPedalS === null ? 'no correct pedal' : `recognise ${(pedal - data.zeroS).toFixed(1)} s`,
    'hatch',
  );
  if (data.firstPedalS !== null) {
    part(pedal, calm, `correct ${(calm - pedal).toFixed(1)} s`, 'grey');
    part(calm, data.durationS, 'hold', null);
  }
  let lastEnd = -Infinity;
  for (const event of data.events) {
    const x = at(event.timeS);
    d.lineWidth(0.75)
      .moveTo(x, top - 4)
      .lineTo(x, top + 12)
      .stroke('#000');
    d.path(`M${x} ${top - 16} h9 l4 6 l-4 6 h-9 Z`).fill('#000');
    sheet.text.line(event.letter, x + 2.5, top - 14.5, { face: 'monoBold', size: 7.5, colour: '#fff' });
    const wide = sheet.text.width(event.text, { face: 'bold', size: 7.5 });
    if (x + 16 > lastEnd && x + 16 + wide < sheet.left + sheet.width) {
      sheet.text.line(event.text, x + 16, top - 14.5, { face: 'bold', size: 7.5 });
      lastEnd = x + 20 + wide;
    }
  }
  for (const t of roundTicks([-data.zeroS, data.durationS - data.zeroS], 8)) {
    const x = at(t + data.zeroS);
    d.moveTo(x, top + 12)
      .lineTo(x, top + 15)
      .stroke('#000');
    sheet.text.line(t > 0 ? `+${t}` : String(t), x - 15, top + 17, { face: 'mono', size: 7, align: 'centre' }, 30);
  }
  sheet.y = top + 34;
}

/** Small balance strips: nose, ball and pedal against the balanced line, joined by the mast. */
function balance(sheet: Sheet, data: DebriefSheetData): void {
  sheet.section(2, 'Balance, second by second', data.deadWords, 52);
  const d = sheet.doc;
  const gap = 6;
  const w = (sheet.width - gap * (data.strip.length - 1)) / Math.max(5, data.strip.length);
  data.strip.forEach((frame, i) => {
    const x = sheet.left + i * (w + gap);
    const y = sheet.y;
    const middle = x + w / 2;
    const half = w / 2 - 10;
    const place = (value: number, full: number): number => middle + Math.max(-1, Math.min(1, value / full)) * half;
    if (frame.deadSide !== 0) {
      const dead = frame.deadSide > 0 ? x : x + w - 7;
      const live = frame.deadSide > 0 ? x + w - 7 : x;
      sheet.hatch(dead, y, 7, 36, 3);
      for (let k = 0; k < 12; k++) d.circle(live + 2 + (k % 2) * 3, y + 2 + k * 3, 0.7).fill('#000');
    }
    d.lineWidth(0.75).rect(x, y, w, 36).stroke('#000');
    d.lineWidth(0.4)
      .dash(1.5, { space: 1.5 })
      .moveTo(middle, y)
      .lineTo(middle, y + 36)
      .stroke('#555')
      .undash();
    const nose = place(frame.nose, 10);
    const ball = place(frame.ball, 2.2);
    const pedal = place(frame.pedal, 100);
    d.lineWidth(frame.verdict === 0 ? 4 : 1)
      .moveTo(nose, y + 8)
      .lineTo(ball, y + 17)
      .lineTo(pedal, y + 26)
      .stroke('#000');
    d.path(`M${nose} ${y + 3} l4 8 h-8 Z`).fill('#000');
    d.circle(ball, y + 17, 3.6).fill('#000');
    d.rect(pedal - 6, y + 24, 12, 4.5).fill('#000');
    const tilt = Math.max(-6, Math.min(6, frame.bankDeg * 0.2));
    d.lineWidth(1)
      .moveTo(x + 9, y + 32 - tilt)
      .lineTo(x + w - 9, y + 32 + tilt)
      .stroke('#000');
    sheet.text.line(`+${frame.timeS} s`, x, y + 39, { face: 'mono', size: 7.5, align: 'centre' }, w);
  });
  sheet.y += 56;
}

function traces(sheet: Sheet, data: DebriefSheetData): void {
  const height = 62;
  sheet.section(
    3,
    'Traces',
    'solid: trainee · dashed: reference pilot, 1 s · hatched: beyond the limit',
    height * data.rows.length,
  );
  const from = -data.zeroS;
  const to = data.durationS - data.zeroS;
  data.rows.forEach((row, i) => {
    sheet.need(height + 4);
    const all = [...row.values, ...(row.reference?.values ?? [])].filter(Number.isFinite);
    const most = Math.max(1, ...all.map(Math.abs), row.limit ?? 0) * 1.12;
    const last = i === data.rows.length - 1;
    const forbidden = (side: 1 | -1): [number, number][] => {
      const limit = (row.limit ?? 0) * side;
      return [
        [from, limit],
        [to, limit],
        [to, most * side],
        [from, most * side],
      ];
    };
    sheet.text.line(row.name, sheet.left, sheet.y + 18, { face: 'bold', size: 8 }, 54);
    sheet.text.line(row.unit, sheet.left, sheet.y + 28, { face: 'mono', size: 7 }, 54);
    drawPlot(
      sheet,
      {
        x: sheet.left + 50,
        width: sheet.width - 50,
        height: last ? height + 12 : height,
        xRange: [from, to],
        yRange: [-most, most],
        xTicks: roundTicks([from, to], 10),
        yTicks: roundTicks([-most, most], 2),
        xText: last ? (t) => (t > 0 ? `+${t}` : String(t)) : () => '',
        areas:
          row.limit === null
            ? []
            : [
                { points: forbidden(1), hatched: true },
                { points: forbidden(-1), hatched: true },
              ],
        series: [
          { x: row.timeS.map((t) => t - data.zeroS), y: row.values },
          ...(row.reference
            ? [{ x: row.reference.timeS.map((t) => t - data.zeroS), y: row.reference.values, line: 'dashed' as const }]
            : []),
        ],
      },
      false,
    );
    sheet.y += last ? height + 12 : height - 14;
  });
  sheet.y += 4;
}
