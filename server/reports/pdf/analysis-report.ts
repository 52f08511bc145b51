import type { CriterionResult } from '#shared/analysis/criteria-8785c.ts';
import type { Mode } from '#shared/analysis/modes.ts';
import type { AnalysisReport, ReportLimit } from './analysis-report-data.ts';
import { drawControlSpeed, drawRoots } from './analysis-report-plots.ts';
import { type ResultState, Sheet, type SheetCell } from './sheet.ts';

const SUFFIXES = ['beta', 'p', 'r', 'da', 'dr'] as const;
const MODE_NAMES: Readonly<Record<Mode['kind'], string>> = {
  'dutch-roll': 'Dutch roll',
  roll: 'Roll',
  spiral: 'Spiral',
  'roll-spiral': 'Coupled roll and spiral',
  'real-pair': 'Real pair in place of the Dutch roll',
  washout: 'Damper washout',
};
/** Titles that fit a line of the table. */
const SHORT_TITLES: Partial<Record<CriterionResult['id'], string>> = {
  'dutch-damping': 'Dutch roll, damping',
  'dutch-frequency': 'Dutch roll, frequency',
  'roll-mode': 'Roll, time constant',
  spiral: 'Spiral, time to double',
  'roll-oscillation': 'Roll rate, first dip over peak',
  'sideslip-approach': 'Sideslip at 75% roll control',
  '25.181': 'Dutch roll, damped',
  '23.181': 'Dutch roll, 1/10 in 7 cycles',
};
const PLOT_HEIGHT = 176;

const withUnit = (value: string, unit: string): string => (unit === 'deg' ? `${value}°` : `${value} ${unit}`.trim());

const digits = (value: number | null | undefined, n = 3): string =>
  value === null || value === undefined || !Number.isFinite(value) ? '-' : String(Number(value.toPrecision(n)));
const fixed = (value: number | null, n: number): string =>
  value === null || !Number.isFinite(value) ? '-' : value.toFixed(n);
const signed = (value: number): string => (value > 0 ? `+${digits(value)}` : digits(value));

/** An analysis report as a PDF file. */
export async function analysisReportPdf(report: AnalysisReport): Promise<Buffer> {
  const { head } = report;
  const short = `${head.digest.slice(0, 4)} ${head.digest.slice(4, 8)}`;
  const sheet = new Sheet({
    organisation: head.organisation,
    kind: head.study === '' ? 'Analysis report' : `Analysis report: ${head.study}`,
    number: head.number,
    title: `${head.name}, revision ${head.revision}`,
    subtitle: head.provenance,
    trace: `${head.slug} r${head.revision} · digest ${short} · program ${head.programVersion}`,
    printed: head.printed,
    caution: head.caution,
  });
  sheet.boxes(report.facts.map((fact) => ({ ...fact })));
  if (report.moved !== '') sheet.paragraph(report.moved, { face: 'bold', size: 8.5 });
  derivatives(sheet, report);
  figures(sheet, report);
  criteria(sheet, report.criteria);
  limits(sheet, report);
  sheet.section(6, 'Read with care');
  for (const caution of report.cautions) sheet.paragraph(caution, { size: 8.5 });
  modes(sheet, report);
  let next = 8;
  if (report.compared.length > 1) compared(sheet, report, next++);
  inputs(sheet, report, next++);
  sources(sheet, report, next++);
  if (report.answers.length > 0) answers(sheet, report, next++);
  return sheet.finish();
}

function derivatives(sheet: Sheet, report: AnalysisReport): void {
  sheet.section(1, 'Derivatives at this condition', 'per radian, stability axes; ± is 2σ; letter: source', 70);
  const of = new Map(report.derivatives.map((d) => [d.key, d]));
  const cell = (key: string): string => {
    const d = of.get(key);
    if (d === undefined) return '-';
    const spread = d.uncertaintyPct === null ? '' : ` ±${digits(d.uncertaintyPct, 2)}%`;
    return `${d.value.toFixed(3)}${spread} ${d.letter || ' '}`;
  };
  const heads = ['β', 'p', 'r', 'δa', 'δr'];
  sheet.table(
    [
      { head: '', share: 0.08, mono: true, bold: true },
      ...heads.map((name) => ({ head: name, share: 0.184, align: 'right' as const, mono: true })),
    ],
    ['CY', 'Cl', 'Cn'].map((family) => [family, ...SUFFIXES.map((suffix) => cell(`${family}_${suffix}`))]),
  );
  const used = new Set(report.derivatives.map((d) => d.letter));
  const legend = report.sources.filter(({ letter }) => used.has(letter));
  const words = legend.map(({ letter, text }) => `${letter} ${text.length > 70 ? `${text.slice(0, 69)}…` : text}`);
  sheet.y -= 3;
  sheet.paragraph([...words, report.inertias].join(' · '), { size: 7.5, colour: '#333' });
}

function figures(sheet: Sheet, report: AnalysisReport): void {
  const half = (sheet.width - 14) / 2;
  sheet.need(PLOT_HEIGHT + 44);
  sheet.rule(0.75);
  sheet.y += 5;
  sheet.sectionHead(2, 'Roots in the s-plane', sheet.left, half, `1/s; dots: ${report.speedUnit}`);
  sheet.sectionHead(3, `Minimum control speed, ${report.speedUnit}`, sheet.left + half + 14, half, aside(report));
  sheet.y += 19;
  drawRoots(sheet, report.sPlane, sheet.left, half, PLOT_HEIGHT);
  drawControlSpeed(sheet, report.controlSpeed, sheet.left + half + 14, half, PLOT_HEIGHT);
  sheet.y += PLOT_HEIGHT + 6;
}

const aside = ({ controlSpeed }: AnalysisReport): string =>
  controlSpeed.reason === null ? `${controlSpeed.failed} failed` : '';

function stateOf(level: CriterionResult['level']): { state: ResultState; text: string } {
  if (level === null) return { state: 'not-reached', text: 'does not apply' };
  if (level === 'met') return { state: 'met', text: 'met' };
  if (level === 'not met') return { state: 'not-met', text: 'not met' };
  if (level === 4) return { state: 'not-met', text: 'below Level 3' };
  return { state: level === 1 ? 'met' : 'near', text: `Level ${level}` };
}

/** Where the limit stands on the bar, and how far the value reaches towards it. */
const LIMIT_AT = 0.75;
function marginBar({ value, limit, sense }: CriterionResult): SheetCell {
  if (value === null || limit === null || !(limit > 0)) return '-';
  const used = sense === 'at most' ? value / limit : value > 0 ? limit / value : Infinity;
  return { bar: { value: Math.min(1, Math.max(0, used) * LIMIT_AT), limit: LIMIT_AT, forbid: 'above' } };
}

function criteria(sheet: Sheet, results: readonly CriterionResult[]): void {
  const shown = results.filter(({ level }) => level !== null);
  const left = results.filter(({ level }) => level === null);
  sheet.section(4, 'Modes and criteria', 'limit and margin against Level 1, or against the paragraph', 60);
  sheet.table(
    [
      { head: 'Criterion', share: 0.29, bold: true },
      { head: 'Value', share: 0.13, align: 'right', mono: true },
      { head: 'Asked', share: 0.12, align: 'right', mono: true },
      { head: 'Margin', share: 0.1, align: 'right', mono: true },
      { head: '', share: 0.085 },
      { head: 'Result', share: 0.125 },
      { head: 'Cited', share: 0.15 },
    ],
    shown.map((result): SheetCell[] => {
      const { value, limit, unit, sense } = result;
      const asked = limit === null ? '-' : `${sense === 'at least' ? '≥' : '≤'} ${digits(limit)}`;
      const margin =
        value === null || limit === null || !Number.isFinite(value)
          ? '-'
          : signed(sense === 'at least' ? value - limit : limit - value);
      return [
        SHORT_TITLES[result.id] ?? result.title,
        value === null ? (result.remark ?? '-') : withUnit(digits(value), unit),
        asked,
        margin,
        marginBar(result),
        stateOf(result.level),
        result.source.replace(/^MIL-F-8785C,?\s*/, '').replace(/\s*\(.*\)$/, ''),
      ];
    }),
  );
  const why = left.map(({ title, remark }) => `${title}: ${remark ?? 'does not apply'}.`);
  sheet.y -= 3;
  sheet.paragraph(['Paragraph numbers without a title are of MIL-F-8785C.', ...why].join(' '), {
    size: 7.5,
    colour: '#333',
  });
}

function limits(sheet: Sheet, report: AnalysisReport): void {
  const note = report.draws > 0 ? `what binds is named; 2σ of ${report.draws} draws` : 'what binds is named';
  sheet.section(5, 'Limits', note, 60);
  const row = (limit: ReportLimit): SheetCell[] => [
    limit.name,
    limit.speed === null ? '-' : `${limit.speed.toFixed(1)} ${report.speedUnit}`,
    limit.binds,
    limit.sideslipDeg === null ? '-' : `${fixed(limit.sideslipDeg, 1)}°`,
    limit.aileronDeg === null ? '-' : `${fixed(limit.aileronDeg, 1)}°`,
    limit.rudderDeg === null ? '-' : `${fixed(limit.rudderDeg, 1)}°`,
    limit.twoSigma === null ? '-' : `±${limit.twoSigma.toFixed(1)} ${report.speedUnit}`,
  ];
  sheet.table(
    [
      { head: 'Limit', share: 0.27, bold: true },
      { head: 'Value', share: 0.11, align: 'right', mono: true },
      { head: 'Binds', share: 0.21 },
      { head: 'Sideslip', share: 0.1, align: 'right', mono: true },
      { head: 'Aileron', share: 0.1, align: 'right', mono: true },
      { head: 'Rudder', share: 0.1, align: 'right', mono: true },
      { head: '2σ', share: 0.11, align: 'right', mono: true },
    ],
    report.limits.map(row),
  );
}

function modes(sheet: Sheet, report: AnalysisReport): void {
  sheet.section(7, 'Roots', 'linear, about the trimmed condition', 60);
  const root = ({ re, im }: Mode): string => (im > 0 ? `${digits(re)} ± ${digits(im)}i` : digits(re));
  const time = ({ halveS, doubleS }: Mode): string =>
    doubleS !== undefined ? `doubles ${digits(doubleS)} s` : halveS === undefined ? '-' : `halves ${digits(halveS)} s`;
  sheet.table(
    [
      { head: 'Mode', share: 0.28, bold: true },
      { head: 'Root, 1/s', share: 0.2, align: 'right', mono: true },
      { head: 'ζ', share: 0.09, align: 'right', mono: true },
      { head: 'ω, rad/s', share: 0.1, align: 'right', mono: true },
      { head: 'Period, s', share: 0.1, align: 'right', mono: true },
      { head: 'Amplitude', share: 0.23, align: 'right', mono: true },
    ],
    report.modes.map((mode) => [
      MODE_NAMES[mode.kind],
      root(mode),
      digits(mode.zeta),
      digits(mode.wn),
      digits(mode.periodS),
      time(mode),
    ]),
  );
}

function compared(sheet: Sheet, report: AnalysisReport, number: number): void {
  sheet.section(number, 'Compared revisions', `each at the condition of the first; speeds in ${report.speedUnit}`, 60);
  const heads = ['Dutch ζ', 'ω, rad/s', 'Roll τ, s', 'Level', 'Vmca 0°', 'Vmca best', 'Crosswind'];
  sheet.table(
    [
      { head: 'Revision', share: 0.23, bold: true },
      ...heads.map((head) => ({ head, share: 0.11, align: 'right' as const, mono: true })),
    ],
    report.compared.map(({ label, cells }) => [label, ...cells]),
  );
}

function inputs(sheet: Sheet, report: AnalysisReport, number: number): void {
  sheet.section(number, 'Inputs', 'members of the file; ± is 2σ; letter: source', 60);
  const rows: SheetCell[][] = [];
  const half = Math.ceil(report.inputs.length / 2);
  for (let i = 0; i < half; i++) {
    const cells = [report.inputs[i], report.inputs[i + half]].flatMap((input) =>
      input === undefined
        ? ['', '']
        : [
            input.field,
            `${input.value}${input.uncertaintyPct === null ? '' : ` ±${digits(input.uncertaintyPct, 2)}%`} ${input.letter}`,
          ],
    );
    rows.push(cells);
  }
  const pair = [
    { head: 'Member', share: 0.31 },
    { head: 'Value', share: 0.19, align: 'right' as const, mono: true },
  ];
  sheet.table([...pair, ...pair], rows);
}

function sources(sheet: Sheet, report: AnalysisReport, number: number): void {
  sheet.section(number, 'Sources and identity', '', 40);
  if (report.sources.length === 0) sheet.paragraph('The data names no sources.', { size: 8.5 });
  for (const { letter, text } of report.sources) sheet.paragraph(`${letter}  ${text}`, { size: 8.5 });
  const { head } = report;
  sheet.paragraph(`SHA-256 of the revision’s JSON export: ${head.digest}`, { face: 'mono', size: 7.5 });
}

function answers(sheet: Sheet, report: AnalysisReport, number: number): void {
  sheet.section(number, 'Warnings answered at release', '', 40);
  for (const { field, message, answer } of report.answers)
    sheet.paragraph(`${field}: ${message}. Answer: ${answer}`, { size: 8.5 });
}
