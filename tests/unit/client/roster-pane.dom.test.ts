import { createPinia, setActivePinia } from 'pinia';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import RosterPane from '../../../src/views/administration/RosterPane.vue';
import { mountComponent, settle } from './mount-component.ts';

beforeEach(() => setActivePinia(createPinia()));
afterEach(() => vi.unstubAllGlobals());

const FILE = 'name,email\nIda Moe,ida@b.example\nNo address,\n';
const VERDICTS = [
  { line: 2, verdict: 'good', words: '' },
  { line: 3, verdict: 'wrong', words: 'The address is missing. Give an e-mail address.' },
];

describe('the roster pane', () => {
  it('keeps its verdicts to be read after inviting, and puts them away on request', async () => {
    const invites: boolean[] = [];
    vi.stubGlobal('fetch', async (_path: string, init: RequestInit) => {
      const { invite } = JSON.parse(String(init.body)) as { invite: boolean }; // what the pane sends
      invites.push(invite);
      return new Response(JSON.stringify({ rows: VERDICTS, invited: invite ? 1 : 0 }));
    });
    const { host, query, unmount } = await mountComponent(RosterPane, { events: ['invited'] });
    const input = query<HTMLInputElement>('input[type=file]');
    Object.defineProperty(input, 'files', { value: [new File([FILE], 'roster.csv')] });
    input.dispatchEvent(new Event('change'));
    await settle();
    const button = (text: string): HTMLButtonElement | undefined =>
      [...host.querySelectorAll('button')].find((one) => one.textContent?.includes(text));
    expect(host.textContent).toContain('1 left out');
    button('Invite 1 good row')?.click();
    await settle();
    expect(invites).toEqual([false, true]);
    expect(host.textContent).toContain('1 invited, 1 left out.');
    expect(host.textContent).toContain('The address is missing.');
    expect(button('Invite')).toBeUndefined();
    button('Clear away')?.click();
    await settle();
    expect(host.textContent).not.toContain('The address is missing.');
    unmount();
  });
});
