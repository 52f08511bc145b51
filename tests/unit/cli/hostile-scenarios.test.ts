/** Scenario files that no editor wrote: each is answered in one line with place, rule and remedy, and none hangs. */
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { documentOf } from '../scenario/support/build-scenario.ts';
import { sidewash, sidewashJson } from './run-command.ts';

let folder = '';
beforeAll(() => {
  folder = mkdtempSync(path.join(tmpdir(), 'sidewash-hostile-'));
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));
const fileOf = (text: string): string => {
  const file = path.join(folder, 'scenario.json');
  writeFileSync(file, text);
  return file;
};

const cut = { id: 'cut', lane: 'engines', at: { time_s: 1 }, kind: 'engine-failure', engine: 'left' };
const mark = (id: string, at: object): object => ({ id, lane: 'notes', at, kind: 'marker', text: 'x' });
const when = (text: string): object => ({ events: [cut, mark('w', { when: text })] });
const judged = (over: object): object => ({
  events: [cut],
  criteria: [{ id: 'b', title: 'Bank', measure: 'bank', from: 'cut', limit: { max: 30, unit: 'deg' }, ...over }],
});
const textOf = (over: object): string => JSON.stringify({ ...documentOf(), ...over });
/** For what JSON.stringify would not write. */
const replaced = (over: object, from: string, to: string): string => textOf(over).replace(from, to);

type Case = readonly [what: string, text: string, place: string, rule: string];
const REFUSED: readonly Case[] = [
  [
    'a circle of two',
    textOf({ events: [mark('a', { after: 'b' }), mark('b', { after: 'a' })] }),
    '/events/1/at',
    'cycle',
  ],
  [
    'a circle by since()',
    textOf({ events: [mark('a', { when: 'since(b) > 1 s' }), mark('b', { after: 'a' })] }),
    '/events/1/at',
    'cycle',
  ],
  ['an event waiting on itself', textOf({ events: [mark('a', { after: 'a' })] }), '/events/0/at', 'cycle'],
  ['a dangling event', textOf({ events: [mark('a', { after: 'gone' })] }), '/events/0/at/after', 'known-event'],
  [
    'a dangling since()',
    textOf(when('since(cut) > 1 s and since(c) > 1 s')),
    '/events/1/at/when: known-event: at character 28',
    'known-event',
  ],
  ['a dangling window', textOf(judged({ to: 'gone' })), '/criteria/0/to', 'known-event'],
  ['a negative time', textOf({ events: [{ ...cut, at: { time_s: -3 } }] }), '/events/0/at/time_s', 'minimum'],
  [
    'a negative delay',
    textOf({ events: [cut, mark('a', { after: 'cut', delay_s: -1 })] }),
    '/events/1/at/delay_s',
    'minimum',
  ],
  [
    'a window that ends first',
    textOf(judged({ from: { after: 'cut', plus_s: 5 }, to: { after: 'cut', plus_s: 2 } })),
    '/criteria/0/to',
    'window',
  ],
  [
    'an engine that is not there',
    textOf({ events: [{ ...cut, engine: 'third' }] }),
    '/events/0/engine',
    'known-engine',
  ],
  [
    'an engine of the language',
    textOf({ events: [{ ...cut, engine: '__proto__' }] }),
    '/events/0/engine',
    'known-engine',
  ],
  [
    '10,000 events',
    textOf({ events: Array.from({ length: 10_000 }, (_, i) => mark(`m${i}`, { time_s: 1 })) }),
    '/events',
    'maximum',
  ],
  ['another version', textOf({ format: 'sidewash.scenario/2' }), '/format', 'format-version'],
  ['another kind of file', textOf({ format: 'sidewash.airframe/1' }), '/format', 'format'],
  ['a huge power', textOf(when('ias ^ 999999 > 1 kt')), '/events/1/at/when', 'expression'],
  ['a value beyond numbers', textOf(when('ias > 1e200 * 1e200 kt')), '/events/1/at/when', 'expression'],
  ['property access', textOf(when('ias.constructor("x") > 1')), '/events/1/at/when', 'expression'],
  ['an index', textOf(when('ias["constructor"] > 1')), '/events/1/at/when', 'expression'],
  ['an assignment', textOf(when('ias = 80 kt')), '/events/1/at/when', 'expression'],
  ['a loop', textOf(when('while(1) {}')), '/events/1/at/when', 'expression'],
  ['a function', textOf(when('f(x) = x')), '/events/1/at/when', 'expression'],
  ['a range', textOf(when('1:1000000000 > 1')), '/events/1/at/when', 'expression'],
  ['deep nesting', textOf(when(`${'('.repeat(150)}ias${')'.repeat(150)} > 1 kt`)), '/events/1/at/when', 'expression'],
  ['a megabyte of expression', textOf(when('ias > 1 kt and '.repeat(70_000))), '/events/1/at/when', 'expression'],
  ['look-alike letters', textOf(when('іas > 80 kt')), '/events/1/at/when', 'expression'],
  ['an invisible character', textOf(when('ias\u200b > 80 kt')), '/events/1/at/when', 'expression'],
  ['a bare angle', textOf(when('bank > 5')), '/events/1/at/when', 'expression'],
  ['a unit twice', textOf(when('ias > 80 kt kt')), '/events/1/at/when', 'expression'],
  ['a limit in another unit', textOf(judged({ limit: { max: 30, unit: 'kt' } })), '/criteria/0/limit/unit', 'unit'],
  ['a limit in no unit', textOf(judged({ limit: { max: 30, unit: 'toString' } })), '/criteria/0/limit/unit', 'unit'],
  ['NaN in quotes', textOf({ duration_s: 'NaN' }), '/duration_s', 'type'],
  [
    'an infinite number',
    replaced({ duration_s: 30 }, '"duration_s":30', '"duration_s":1e999'),
    '/duration_s',
    'finite',
  ],
  ['null for events', textOf({ events: null }), '/events', 'type'],
  ['null for an event', textOf({ events: [null] }), '/events/0', 'type'],
  ['a kind of the language', textOf({ events: [{ ...cut, kind: 'constructor' }] }), '/events/0/kind', 'one-of'],
  [
    'a range of the language',
    replaced({ events: [{ ...cut, vary: {} }] }, '"vary":{}', '"vary":{"__proto__":[1,2]}'),
    '/events/0/vary/__proto__',
    'variable-member',
  ],
  ['a falling range', textOf({ events: [{ ...cut, vary: { time_s: [5, 1] } }] }), '/events/0/vary/time_s', 'ascending'],
  ['a blank title', textOf({ title: '   ' }), '/title', 'minimum'],
  ['a path for a slug', textOf({ airframe: { slug: '../../secret', revision: 1 } }), '/airframe/slug', 'format'],
  ['a start that no trim holds', textOf({ start: { ias_kt: 1, height_ft: 2000, levers: [1, 0] } }), '/start', 'trim'],
  ['a line break in a name', textOf({ events: [{ ...cut, kind: 'a\nb\u001b[31m' }] }), '/events/0/kind', 'one-of'],
];

describe.each(['run', 'budget'])('sidewash %s', (command) => {
  it.each(REFUSED)('refuses %s', async (_what, text, place, rule) => {
    const file = fileOf(text);
    const { code, out, err } = await sidewash(command, file);
    expect(code).toBe(2);
    expect(out).toBe('');
    const line = err.trimEnd();
    expect(line).toContain(`${file}: ${place}`);
    expect(line).toContain(rule);
    expect(line).not.toMatch(/\p{Cc}/u);
    // A sentence that says what to do ends the line.
    expect(line).toMatch(/\. [A-Z][^.]*.*\.$/u);
    expect(line.length).toBeLessThan(700);
  });

  it.each([
    ['no JSON', '{'],
    ['nothing', ''],
    ['100,000 lists in each other', '['.repeat(100_000) + ']'.repeat(100_000)],
    ['a list', '[]'],
    ['null', 'null'],
  ])('refuses %s', async (_what, text) => {
    const { code, err } = await sidewash(command, fileOf(text));
    expect(code).toBe(2);
    expect(err.trimEnd()).not.toContain('\n');
    expect(err).not.toMatch(/\n\s+at /u);
  });
});

describe('unusual but right', () => {
  it('a chain of 500 events, each after the one before, fires a tick apart', async () => {
    const events = Array.from({ length: 500 }, (_, i) =>
      mark(`m${i}`, i === 0 ? { time_s: 0 } : { after: `m${i - 1}` }),
    );
    const { warnings } = await sidewashJson('run', fileOf(textOf({ events, duration_s: 5 })));
    // Tick 499 is at 4.158 s, so every one of them fires within five seconds.
    expect(String(warnings)).not.toContain('did not fire');
  });
  it('500 conditions and 100 criteria are flown', async () => {
    const events = Array.from({ length: 500 }, (_, i) =>
      mark(`m${i}`, { when: `ias < ${i} kt and abs(bank) > 100 deg` }),
    );
    const limit = { max: 30, unit: 'deg' };
    const criteria = Array.from({ length: 100 }, (_, i) => ({ id: `c${i}`, title: 'Bank', measure: 'bank', limit }));
    const { ended } = await sidewashJson('run', fileOf(textOf({ events, criteria })));
    expect(ended).toBe('completed');
  });
  it('no events and no criteria: a run without a verdict, and a budget that says why there is none', async () => {
    expect(await sidewashJson('run', fileOf(textOf({})))).toMatchObject({ ended: 'completed', criteria: [] });
    expect(await sidewashJson('budget', fileOf(textOf({})))).toMatchObject({ budget_s: null });
  });
  it('words in any script and mark-up are text', async () => {
    const { code, out } = await sidewash('run', fileOf(textOf({ title: 'Ämter <b>飛行</b> 🛩' })));
    expect(code).toBe(0);
    expect(out).toContain('Ämter <b>飛行</b> 🛩');
  });
  it('windows that never hold anything are flown, with a warning', async () => {
    const late = judged({ from: { after: 'cut', plus_s: 500 } });
    expect(String((await sidewashJson('run', fileOf(textOf(late)))).warnings)).toContain(
      'does not open before the run ends',
    );
    const nothing = judged({ from: 'cut', to: 'cut' });
    expect(String((await sidewashJson('run', fileOf(textOf(nothing)))).warnings)).toContain('closes in the moment');
  });
  it('a gust that breaks the numbers stops the run with its place', async () => {
    const gust = {
      id: 'g',
      lane: 'air',
      at: { time_s: 1 },
      kind: 'gust',
      axis: 'lateral',
      from: 'left',
      shape: 'step',
      peak_kt: 200,
    };
    const { code, err } = await sidewash('run', fileOf(textOf({ events: [gust], duration_s: 60 })));
    expect(code).toBe(2);
    expect(err).toMatch(/: \/events: non-finite: the run stopped at \d.* Lower what the events before it ask\.$/mu);
  });
});
