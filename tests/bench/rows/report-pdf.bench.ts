import PDFDocument from 'pdfkit';
import { startBenchProduct } from '../bench-product.ts';
import { defineBench, median } from '../harness.ts';

const GOAL_S = 3;
const REPORTS = 6;
const STATE = {
  airframe: 'four-jet',
  revision: '1',
  ias: '180',
  compare: 'twin-jet:1,light-twin:1',
  shifts: 'Cn_beta:0.01',
};

/** A printed report of three revisions, from the request to the last byte; the first one starts its thread too. */
export default defineBench({
  name: 'report-pdf',
  claim: 'an analysis report of one revision beside two others, computed and drawn, over HTTP',
  async run({ note, cleanUp }) {
    const product = await startBenchProduct(cleanUp);
    const times: number[] = [];
    let bytes = 0;
    for (let i = 0; i < REPORTS; i++) {
      const from = performance.now();
      const answer = await fetch(`${product.address}/api/reports/analysis`, {
        method: 'POST',
        headers: product.headers,
        body: JSON.stringify({ state: STATE }),
      });
      if (!answer.ok) throw new Error(`The report answered ${answer.status}: ${await answer.text()}`);
      bytes = (await answer.arrayBuffer()).byteLength;
      times.push((performance.now() - from) / 1000);
    }
    note(`each report has ${(bytes / 1024).toFixed(0)} KiB`);
    const [first, ...later] = times;
    const blanks: number[] = [];
    for (let i = 0; i < REPORTS; i++) blanks.push(await blankDocument());
    const blank = median(blanks);
    const slowest = Math.max(...times);
    return {
      value: slowest,
      unit: 's',
      ratio: median(later) / blank,
      baseline: `three pages with one line each, written by the same library: ${(blank * 1000).toFixed(0)} ms`,
      goal: `the slowest ≤ ${GOAL_S} s`,
      met: slowest <= GOAL_S,
      details: [
        { label: 'first, with the start of its thread from TypeScript', value: first, unit: 's' },
        { label: 'later ones, median', value: median(later), unit: 's' },
      ],
    };
  },
});

async function blankDocument(): Promise<number> {
  const from = performance.now();
  const document = new PDFDocument({ size: 'A4' });
  const done = new Promise((resolve) => document.on('end', resolve));
  document.on('data', () => undefined);
  for (let page = 0; page < 3; page++) {
    if (page > 0) document.addPage();
    document.text('A line of text.');
  }
  document.end();
  await done;
  return (performance.now() - from) / 1000;
}
