import { createPinia, setActivePinia } from 'pinia';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import PasswordPane from '../../../src/views/account/PasswordPane.vue';
import { mountComponent, settle, type } from './mount-component.ts';

beforeEach(() => setActivePinia(createPinia()));
afterEach(() => vi.unstubAllGlobals());

describe('the password pane', () => {
  it.each([
    ['/password', 'has at most 72 bytes', 1],
    ['/current', 'The current password is wrong', 0],
  ])('shows what the server says of %s beside its field', async (field, message, index) => {
    const problem = {
      ...{ type: 'about:blank', title: 'validation', status: 422, code: 'validation', detail: 'No.' },
      errors: [{ field, rule: 'r', message, remedy: 'Mend it' }],
    };
    vi.stubGlobal('fetch', async () => new Response(JSON.stringify(problem), { status: 422 }));
    const { host, query, unmount } = await mountComponent(PasswordPane, {});
    const queryAll = <E extends Element>(selector: string): E[] => [...host.querySelectorAll<E>(selector)];
    const inputs = queryAll<HTMLInputElement>('input');
    await type(inputs[0], 'the current one');
    await type(inputs[1], 'long enough for all');
    await type(inputs[2], 'long enough for all');
    query<HTMLFormElement>('form').dispatchEvent(new Event('submit', { cancelable: true }));
    await settle();
    const invalid = queryAll<HTMLInputElement>('input').map((input) => input.getAttribute('aria-invalid') === 'true');
    expect(invalid.indexOf(true)).toBe(index);
    expect(query(`#${CSS.escape(inputs[index].getAttribute('aria-describedby') ?? '')}`).textContent).toContain(
      message,
    );
    unmount();
  });
});
