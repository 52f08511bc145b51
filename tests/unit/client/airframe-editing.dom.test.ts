/** Editing a draft: the table in place with undo, the import of a sheet, and two engineers on one draft. */
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { defineComponent, h, markRaw, nextTick, ref } from 'vue';
import ConflictPanel from '../../../src/features/airframe-editing/ConflictPanel.vue';
import DerivativeTable from '../../../src/features/airframe-editing/DerivativeTable.vue';
import { readDerivative } from '../../../src/features/airframe-editing/derivative-entry.ts';
import { jsonOf, type Json } from '../../../src/features/airframe-editing/draft-document.ts';
import { useDraft, type Draft } from '../../../src/features/airframe-editing/use-draft.ts';
import { useDraftSaving, type DraftSaving } from '../../../src/features/airframe-editing/use-draft-saving.ts';
import ImportWizard from '../../../src/features/airframe-import/ImportWizard.vue';
import { mountComponent, settle, type } from './mount-component.ts';

const TWIN = jsonOf(
  JSON.parse(readFileSync(join(import.meta.dirname, '../../../scenarios/airframes/light-twin.json'), 'utf8')),
);
const CN_BETA = '/configurations/0/derivatives/0/Cn_beta';
const opened = (): Draft => {
  const draft = useDraft();
  draft.open(TWIN, TWIN);
  return draft;
};
const press = (field: Element, key: string): void =>
  void field.dispatchEvent(new KeyboardEvent('keydown', { key, bubbles: true, cancelable: true }));
const button = (host: Element, words: string | RegExp): HTMLButtonElement => {
  const found = [...host.querySelectorAll('button')].find((one) => {
    const text = `${one.getAttribute('aria-label') ?? ''} ${one.textContent ?? ''}`;
    return typeof words === 'string' ? text.includes(words) : words.test(text);
  });
  if (!found) throw new Error(`no button ${String(words)}`);
  return found;
};

afterEach(() => {
  vi.unstubAllGlobals();
  vi.useRealTimers();
});

describe('a derivative as typed', () => {
  it.each([
    ['0.12', 0.12],
    ['−0,05', -0.05],
    ['1.2e-2 /rad', 0.012],
    ['0.002 per deg', 0.114591559026],
  ])('%s is read per radian', (text, value) => {
    // per degree: × 180/π
    expect(readDerivative(text)).toEqual({ ok: true, value });
  });
  it.each(['', 'much', '0.1 kt', '1..2'])('%s is refused in words', (text) => {
    expect(readDerivative(text)).toMatchObject({ ok: false });
  });
  it('a lift coefficient has no unit', () => {
    expect(readDerivative('0.5 /deg', true).ok).toBe(false);
  });
});

describe('derivative table', () => {
  async function edit(draft: Draft) {
    const page = await mountComponent(DerivativeTable, { props: { draft: markRaw(draft), configuration: 0 } });
    button(page.host, /^Cn β at CL 0\.45/).click();
    await nextTick();
    return { page, field: () => page.query<HTMLInputElement>('input.in-place') };
  }

  it('keeps with Enter, moves on, and undoes step by step', async () => {
    const draft = opened();
    const before = draft.read(CN_BETA);
    const { page, field } = await edit(draft);
    await type(field(), '0.111');
    press(field(), 'Enter');
    await nextTick();
    expect(draft.read(CN_BETA)).toBe(0.111);
    expect(field().getAttribute('aria-label')).toContain('Cn p');
    await type(field(), '-0.2');
    press(field(), 'Enter');
    await nextTick();
    expect(page.host.querySelectorAll('tbody .corner').length).toBe(2);
    draft.undo();
    draft.undo();
    expect(draft.document.value).toEqual(TWIN);
    expect(draft.read(CN_BETA)).toBe(before);
    draft.redo();
    expect(draft.read(CN_BETA)).toBe(0.111);
    page.unmount();
  });

  it('says beside the field what is wrong, keeps the saved value, and Escape gives up', async () => {
    const draft = opened();
    const { page, field } = await edit(draft);
    await type(field(), 'plenty');
    press(field(), 'Enter');
    await nextTick();
    expect(page.query('[role=alert]').textContent).toContain('“plenty” is not a number');
    expect(field().getAttribute('aria-invalid')).toBe('true');
    expect(draft.document.value).toBe(TWIN);
    press(field(), 'Escape');
    await nextTick();
    expect(page.host.querySelector('input.in-place')).toBeNull();
    expect(draft.canUndo.value).toBe(false);
    page.unmount();
  });

  it('only shows when read only', async () => {
    const page = await mountComponent(DerivativeTable, {
      props: { draft: markRaw(opened()), configuration: 0, readOnly: true },
    });
    button(page.host, /^Cn β at CL 0\.45/).click();
    await nextTick();
    expect(page.host.querySelector('input')).toBeNull();
    page.unmount();
  });
});

interface Call {
  method: string;
  path: string;
  body: unknown;
  match: string | null;
}
/** Stands in for the network: answers by method and path, and keeps what was sent. */
function serve(answer: (call: Call) => { status?: number; body: unknown }): Call[] {
  const calls: Call[] = [];
  vi.stubGlobal('fetch', async (path: string, init: RequestInit) => {
    const text = typeof init.body === 'string' ? init.body : '';
    const call: Call = {
      method: init.method ?? 'GET',
      path,
      body: text === '' ? null : JSON.parse(text),
      match: new Headers(init.headers).get('if-match'),
    };
    calls.push(call);
    const { status = 200, body } = answer(call);
    return new Response(JSON.stringify(body), { status });
  });
  return calls;
}
const draftAnswer = (document: unknown, version: string) => ({
  slug: 'twin',
  revision: 2,
  status: 'draft',
  note: '',
  createdBy: 'A. Reyes',
  createdAt: '2026-12-01T10:00:00.000Z',
  releasedAt: null,
  document,
  version,
  changedBy: 'N. Haddad',
  changedAt: '2026-12-01T10:05:00.000Z',
});
const meanwhile = {
  status: 412,
  body: {
    type: 'about:blank',
    title: 'Changed',
    status: 412,
    code: 'changed-meanwhile',
    detail: 'Someone else saved.',
  },
};
const changedTo = (value: number, name?: string): Json => {
  const draft = opened();
  draft.write(CN_BETA, value);
  if (name) draft.write('/name', name);
  return draft.document.value;
};

describe('two engineers on one draft', () => {
  async function meet() {
    const theirs = changedTo(0.071, 'Their twin');
    let met = false;
    const calls = serve(({ method, body }) => {
      if (method === 'GET') return { body: draftAnswer(theirs, 'v2') };
      if (!met) {
        met = true;
        return meanwhile;
      }
      return { body: draftAnswer((body as { document: unknown }).document, 'v3') }; // what was sent
    });
    const draft = useDraft();
    let saving: DraftSaving | null = null;
    const page = await mountComponent(
      defineComponent(() => {
        saving = useDraftSaving(draft, () => ({ slug: 'twin', revision: 2 }), ref(false));
        const s = saving;
        return () =>
          s.conflict.value
            ? h(ConflictPanel, { conflict: s.conflict.value, onBoth: s.keepBoth, onTheirs: s.takeTheirs })
            : h('p', s.state.value);
      }),
    );
    const s = saving as DraftSaving | null; // set while mounting
    if (!s) throw new Error('not mounted');
    s.begin(draftAnswer(TWIN, 'v1') as Parameters<DraftSaving['begin']>[0], TWIN); // as the contract parses it
    draft.write(CN_BETA, 0.099);
    draft.write('/mass/mass_kg', 1800);
    await s.save();
    await settle();
    return { calls, draft, saving: s, page, theirs };
  }

  it('the second is told who saved and what, and keeps both after choosing', async () => {
    const { calls, draft, saving, page } = await meet();
    expect(saving.state.value).toBe('conflict');
    expect(page.query('[role=alert]').textContent).toContain('N. Haddad saved this draft');
    expect(page.query('[role=alert]').textContent).toContain('You changed 2 values, they changed 2 values');
    expect(draft.read(CN_BETA)).toBe(0.099);
    const keep = button(page.host, 'Keep both');
    expect(keep.disabled).toBe(true);
    page.query<HTMLInputElement>('input[value=mine]').click();
    await nextTick();
    keep.click();
    await settle();
    const sent = calls.filter(({ method }) => method === 'PUT').at(-1);
    expect(sent?.match).toBe('"v2"');
    expect(saving.state.value).toBe('saved');
    expect([draft.read(CN_BETA), draft.read('/mass/mass_kg'), draft.read('/name')]).toEqual([
      0.099,
      1800,
      'Their twin',
    ]);
    draft.undo();
    expect([draft.read(CN_BETA), draft.read('/mass/mass_kg')]).toEqual([0.099, 1800]);
    expect(draft.read('/name')).not.toBe('Their twin');
    page.unmount();
  });

  it('taking theirs loses nothing: undo brings back one’s own', async () => {
    const { draft, saving, page, theirs } = await meet();
    button(page.host, 'Take theirs').click();
    await nextTick();
    expect(saving.state.value).toBe('saved');
    expect(draft.document.value).toEqual(theirs);
    draft.undo();
    expect([draft.read(CN_BETA), draft.read('/mass/mass_kg')]).toEqual([0.099, 1800]);
    page.unmount();
  });
});

describe('import wizard', () => {
  const HEAD = 'alpha,CL,CYb,Clb,Cnb,Clp,Cnp,Clr,Cnr,CYdr,Clda,Cnda,Cldr,Cndr'.split(',');
  const line = (CL: string, Cnb: string): string[] =>
    `4,${CL},-0.7,-0.09,${Cnb},-0.5,-0.05,0.2,-0.13,0.15,0.16,-0.01,0.02,-0.07`.split(',');
  const SHEET = {
    fileName: 'tunnel.csv',
    sheets: [{ name: 'tunnel', rows: [HEAD, line('0.5', '0.1'), line('1.2', 'n/a')], remarks: [] }],
  };

  beforeEach(() => localStorage.clear());

  async function choose(content: string, name: string, answer: Parameters<typeof serve>[0] = () => ({ body: SHEET })) {
    const calls = serve(answer);
    const page = await mountComponent(ImportWizard);
    const input = page.query<HTMLInputElement>('input[type=file]');
    Object.defineProperty(input, 'files', { value: [new File([content], name)] });
    input.dispatchEvent(new Event('change', { bubbles: true }));
    await settle(20);
    return { calls, page };
  }
  const labelled = (host: Element, label: string): HTMLInputElement => {
    const found = [...host.querySelectorAll('label')].find((one) => one.textContent?.trim() === label);
    const field = found && host.querySelector<HTMLInputElement>(`#${CSS.escape(found.htmlFor)}`);
    if (!field) throw new Error(`no field ${label}`);
    return field;
  };

  it('shows the bad cell beside its row, nothing converted before it is left out and the rest is typed', async () => {
    const { calls, page } = await choose('a,b', 'tunnel.csv', ({ method, path }) =>
      method === 'POST'
        ? { body: { slug: 'tunnel', revision: 1 } }
        : path.includes('read-sheet')
          ? { body: SHEET }
          : { body: {} },
    );
    expect(page.host.textContent).toContain('row 3, E');
    expect(page.host.textContent).toContain('Cn beta: “n/a” is not a number');
    expect(page.host.textContent).not.toContain('Save as a draft');
    button(page.host, 'Row 3: leave it out').click();
    await nextTick();
    for (const [label, value] of [
      ['Mass, or weight in lb', '1750'],
      ['Wing area', '17'],
      ['Wing span', '11.3'],
      ['Ixx', '2900'],
      ['Izz', '5400'],
    ] as const)
      await type(labelled(page.host, label), value);
    expect(page.host.textContent).toContain('Dutch roll');
    expect(calls.some(({ method }) => method === 'POST')).toBe(false);
    button(page.host, 'Save as a draft').click();
    await settle();
    const made = calls.find(({ method }) => method === 'POST');
    expect(made?.path).toBe('/api/airframes');
    expect(made?.body).toMatchObject({
      note: 'Imported from tunnel.csv.',
      document: { format: 'sidewash.airframe/1', configurations: [{ derivatives: [{ CL: 0.5, Cn_beta: 0.1 }] }] },
    });
    page.unmount();
  });

  it.each([
    ['{"format": NaN}', 'broken.json', 'This is no JSON'],
    ['[1, 2]', 'list.json', 'The file holds no airframe'],
  ])('%s is answered in words', async (content, name, words) => {
    const { page } = await choose(content, name);
    expect(page.query('[role=alert]').textContent).toContain(words);
    page.unmount();
  });

  it('an unknown member and a wrong version of a JSON are named before anything is saved', async () => {
    const { calls, page } = await choose(
      JSON.stringify({ ...(TWIN as object), format: 'sidewash.airframe/9', colour: 'red' }),
      'odd.json',
    );
    expect(page.host.textContent).toContain('/format');
    expect(page.host.textContent).toContain('colour');
    expect(calls).toEqual([]);
    page.unmount();
  });

  it('says what the server says of a file it refuses', async () => {
    const detail = 'The workbook unpacks to more than it may.';
    const { page } = await choose('PK', 'bomb.xlsx', () => ({
      status: 400,
      body: { type: 'about:blank', title: 'Refused', status: 400, code: 'validation', detail },
    }));
    expect(page.query('[role=alert]').textContent).toContain(detail);
    page.unmount();
  });
});
