import { afterEach, describe, expect, it, vi } from 'vitest';
import { h, nextTick } from 'vue';
import AttemptBoxes from '../../../src/components/AttemptBoxes.vue';
import ErrorBoundary from '../../../src/components/ErrorBoundary.vue';
import InkButton from '../../../src/components/InkButton.vue';
import NavigationRuler from '../../../src/components/NavigationRuler.vue';
import PageRuler from '../../../src/components/PageRuler.vue';
import PlainTable from '../../../src/components/PlainTable.vue';
import SearchField from '../../../src/components/SearchField.vue';
import StateWord from '../../../src/components/StateWord.vue';
import CautionLine from '../../../src/components/states/CautionLine.vue';
import ErrorState from '../../../src/components/states/ErrorState.vue';
import LoadingState from '../../../src/components/states/LoadingState.vue';
import { mountComponent, type } from './mount-component.ts';

afterEach(() => {
  vi.useRealTimers();
});

describe('plain table', () => {
  const columns = [
    { key: 'title', title: 'Scenario', sort: 'title' },
    { key: 'count', title: 'Flown', numeric: true },
  ];
  const rows = [
    { id: 'a', title: 'Cut' },
    { id: 'b', title: 'Gust' },
  ];
  const options = {
    props: {
      columns,
      rows,
      rowKey: (row: { id: string }) => row.id,
      caption: 'Scenarios',
      sort: 'title',
      selected: 'b',
    },
    events: ['update:sort'],
  };

  it('says how it is sorted and asks for the other way', async () => {
    const { host, emitted, query, unmount } = await mountComponent(PlainTable, options);
    const heads = [...host.querySelectorAll('th')];
    expect(heads.map((head) => head.getAttribute('aria-sort'))).toEqual(['ascending', null]);
    expect(heads[1]!.querySelector('button')).toBeNull();
    query<HTMLButtonElement>('th button').click();
    expect(emitted['update:sort']).toEqual([['-title']]);
    unmount();
  });

  it('has a caption, a row a datum, and marks the one selected', async () => {
    const { host, query, unmount } = await mountComponent(PlainTable, options);
    expect(query('caption').textContent?.trim()).toBe('Scenarios');
    expect([...host.querySelectorAll('tbody tr')].map((row) => row.classList.contains('is-selected'))).toEqual([
      false,
      true,
    ]);
    unmount();
  });
});

describe('page ruler', () => {
  it('counts, and stops at both ends', async () => {
    const { host, query, set, emitted, unmount } = await mountComponent(PageRuler, {
      props: { page: 1, pageSize: 6, total: 19 },
      events: ['update:page'],
    });
    const buttons = (): HTMLButtonElement[] => [...host.querySelectorAll('button')];
    expect(query('.count').textContent).toBe('1–6 of 19');
    expect(buttons().map((button) => button.disabled)).toEqual([true, false]);
    buttons()[1]!.click();
    expect(emitted['update:page']).toEqual([[2]]);
    await set({ page: 4 });
    expect(query('.count').textContent).toBe('19–19 of 19');
    expect(buttons().map((button) => button.disabled)).toEqual([false, true]);
    unmount();
  });
});

describe('search field', () => {
  it('is focused by the slash key, but not while someone types elsewhere', async () => {
    const { query, unmount } = await mountComponent(SearchField, { props: { modelValue: '', placeholder: 'Title' } });
    const input = query<HTMLInputElement>('input');
    const other = document.createElement('input');
    document.body.append(other);
    other.focus();
    other.dispatchEvent(new KeyboardEvent('keydown', { key: '/', bubbles: true }));
    expect(document.activeElement).toBe(other);
    other.blur();
    document.body.dispatchEvent(new KeyboardEvent('keydown', { key: '/', bubbles: true }));
    expect(document.activeElement).toBe(input);
    other.remove();
    unmount();
  });

  it('reports once, after a pause', async () => {
    vi.useFakeTimers();
    const { query, emitted, unmount } = await mountComponent(SearchField, {
      props: { modelValue: '', placeholder: 'Title', pauseMs: 250 },
      events: ['update:modelValue'],
    });
    await type(query<HTMLInputElement>('input'), 'g');
    await type(query<HTMLInputElement>('input'), 'gust');
    expect(emitted['update:modelValue']).toBeUndefined();
    vi.advanceTimersByTime(260);
    expect(emitted['update:modelValue']).toEqual([['gust']]);
    unmount();
  });
});

describe('navigation ruler', () => {
  it('marks the current area for everyone', async () => {
    const { host, unmount } = await mountComponent(NavigationRuler, {
      props: {
        areas: [
          { name: 'one', label: 'One', to: '/one' },
          { name: 'two', label: 'Two', to: '/two' },
        ],
        current: 'two',
      },
    });
    expect([...host.querySelectorAll('a')].map((link) => link.getAttribute('aria-current'))).toEqual([null, 'page']);
    unmount();
  });
});

describe('states', () => {
  it('always sets a word beside the glyph', async () => {
    const { host, unmount } = await mountComponent(StateWord, { props: { state: 'not-met' } });
    expect(host.textContent).toBe('Not met');
    expect(host.querySelector('svg')?.getAttribute('aria-hidden')).toBe('true');
    unmount();
  });

  it('announces an error with its cause, what was kept, and one action', async () => {
    const { query, emitted, unmount } = await mountComponent(ErrorState, {
      props: { cause: 'The list could not be read.', kept: 'Filters are kept.', action: 'Try again' },
      events: ['action'],
    });
    expect(query('[role=alert]').textContent).toContain('The list could not be read. Filters are kept.');
    query<HTMLButtonElement>('button').click();
    expect(emitted['action']).toHaveLength(1);
    unmount();
  });

  it('says what is being read only after two seconds, or at once when it can count', async () => {
    vi.useFakeTimers();
    const waiting = await mountComponent(LoadingState, { props: { what: 'traces' } });
    expect(waiting.host.textContent).toBe('');
    vi.advanceTimersByTime(2001);
    await nextTick();
    expect(waiting.host.textContent).toBe('Reading traces');
    waiting.unmount();
    const counting = await mountComponent(LoadingState, { props: { what: 'traces', done: 3, of: 8 } });
    expect(counting.host.textContent).toBe('Reading traces, 3 of 8');
    counting.unmount();
  });

  it('carries the fixed caution', async () => {
    const { host, unmount } = await mountComponent(CautionLine, { props: { fact: 'Invented.' } });
    expect(host.textContent?.replace(/\s+/g, ' ')).toContain(
      'Not an approved training device, not for operational use. The approved flight manual and licensed instruction govern.',
    );
    unmount();
  });

  it.each([
    [0, false, 'No attempt yet'],
    [1, true, '1 attempt, the last one met'],
    [3, false, '3 attempts, the last one not met'],
  ])('counts %i attempts in words', async (count, lastMet, words) => {
    const { query, unmount } = await mountComponent(AttemptBoxes, { props: { count, lastMet } });
    expect(query('[role=img]').getAttribute('aria-label')).toBe(words);
    unmount();
  });
});

describe('button', () => {
  it('is a link with an address, a button without, and no link while blocked', async () => {
    const { host, set, unmount } = await mountComponent(InkButton, {
      props: { to: '/scenarios' },
      slots: { default: () => 'Browse' },
    });
    expect(host.querySelector('a')?.getAttribute('href')).toBe('/scenarios');
    await set({ disabled: true });
    expect(host.querySelector('a')).toBeNull();
    expect(host.querySelector('button')?.disabled).toBe(true);
    unmount();
  });
});

describe('error boundary', () => {
  it('shows its own page instead of the one that failed, and clears with the address', async () => {
    let broken = true;
    const Fragile = {
      render() {
        if (broken) throw new Error('the page broke');
        return 'whole';
      },
    };
    const warn = vi.spyOn(console, 'warn').mockImplementation(() => undefined); // Vue reports the render error too
    const { host, set, emitted, unmount } = await mountComponent(ErrorBoundary, {
      props: { resetKey: '/a' },
      slots: { default: () => h(Fragile) },
      events: ['fault'],
    });
    await nextTick();
    expect(host.textContent).toContain('This page stopped working.');
    expect(emitted['fault']).toHaveLength(1);
    broken = false;
    await set({ resetKey: '/b' });
    expect(host.textContent).toBe('whole');
    warn.mockRestore();
    unmount();
  });
});
