import { createPinia, setActivePinia } from 'pinia';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { nextTick } from 'vue';
import { isApiError } from '../../../src/services/api-error.ts';
import { useNoticesStore } from '../../../src/stores/notices.store.ts';
import { usePreferencesStore } from '../../../src/stores/preferences.store.ts';
import { useSessionStore } from '../../../src/stores/session.store.ts';
import SignInView from '../../../src/views/account/SignInView.vue';
import { mountComponent, settle, type } from './mount-component.ts';

const ME = {
  person: { id: '00000000-0000-4000-8000-000000000001', displayName: 'J. Lindqvist', email: 'j@school.example' },
  organisation: {
    id: '00000000-0000-4000-8000-000000000099',
    name: 'Field School of Flight',
    settings: { units: 'si', recognitionTimeS: null, guests: false },
  },
  roles: ['trainee'],
  version: '0.1.0',
};

type Serve = (path: string, method: string) => { status: number; body?: unknown };

/** Stands in for the network; the store and the client are the real ones. */
function serve(answer: Serve): { paths: string[] } {
  const paths: string[] = [];
  vi.stubGlobal('fetch', async (input: string, init: RequestInit) => {
    paths.push(`${init.method} ${input}`);
    const { status, body } = answer(input, init.method ?? 'GET');
    return new Response(body === undefined ? null : JSON.stringify(body), { status });
  });
  return { paths };
}
const refusal = (status: number, code: string, more: object = {}) => ({
  status,
  body: { type: 'about:blank', title: code, status, code, detail: 'No.', ...more },
});

beforeEach(() => {
  localStorage.clear();
  setActivePinia(createPinia());
});
afterEach(() => {
  vi.unstubAllGlobals();
});

describe('session', () => {
  it('asks once who is signed in, however many pages ask', async () => {
    const { paths } = serve(() => ({ status: 200, body: ME }));
    const session = useSessionStore();
    await Promise.all([session.restore(), session.restore()]);
    await session.restore();
    expect(paths).toEqual(['GET /api/session']);
    expect(session.state).toBe('signed-in');
    expect(session.hasRole(['trainee'])).toBe(true);
  });

  it('is signed out when neither session nor refresh is accepted, and does not call that expired', async () => {
    serve(() => refusal(401, 'unauthenticated'));
    const session = useSessionStore();
    await session.restore();
    expect([session.state, session.expired]).toEqual(['signed-out', false]);
  });

  it('stays unknown when the server cannot be reached, so that it can be asked again', async () => {
    vi.stubGlobal('fetch', () => Promise.reject(new TypeError('Failed to fetch')));
    const session = useSessionStore();
    const error: unknown = await session.restore().catch((reason: unknown) => reason);
    expect(isApiError(error, 'unreachable')).toBe(true);
    expect(session.state).toBe('unknown');
    serve(() => ({ status: 200, body: ME }));
    await session.restore();
    expect(session.state).toBe('signed-in');
  });

  it('counts as signed out when the server no longer knows the session', async () => {
    serve(() => ({ status: 200, body: ME }));
    const session = useSessionStore();
    await session.restore();
    serve(() => refusal(401, 'session-expired'));
    await session.signOut();
    expect([session.state, session.expired]).toEqual(['signed-out', false]);
  });
});

describe('preferences', () => {
  it('follows the organisation until the person chooses, which the server keeps', async () => {
    let kept: unknown = null;
    vi.stubGlobal('fetch', async (input: string, init: RequestInit) => {
      if (init.method === 'PUT' && input === '/api/session/profile') {
        const body: unknown = JSON.parse(String(init.body));
        kept = body;
        return new Response(JSON.stringify({ ...ME, person: { ...ME.person, units: 'aviation', timeZone: null } }));
      }
      return new Response(JSON.stringify(ME));
    });
    const session = useSessionStore();
    const preferences = usePreferencesStore();
    expect(preferences.units).toBe('aviation');
    await session.restore();
    await nextTick();
    expect(preferences.units).toBe('si');
    preferences.units = 'aviation';
    expect(preferences.units).toBe('aviation');
    await settle();
    expect(kept).toEqual({ displayName: 'J. Lindqvist', units: 'aviation', timeZone: null });
    expect(session.me?.person.units).toBe('aviation');
    expect(preferences.lastOrganisation).toBe('Field School of Flight');
  });

  it('takes a choice of units back when the server cannot keep it', async () => {
    serve(() => ({ status: 200, body: ME }));
    await useSessionStore().restore();
    const preferences = usePreferencesStore();
    serve(() => refusal(503, 'unavailable'));
    preferences.units = 'aviation';
    await settle();
    expect(preferences.units).toBe('si');
    expect(useNoticesStore().current?.text).toContain('Units not kept.');
  });

  it('sets the sheet colour on the page and survives a damaged record', async () => {
    localStorage.setItem('sidewash.device', '{"theme":"plaid","renderer":7');
    const preferences = usePreferencesStore();
    expect(preferences.theme).toBe('system');
    preferences.theme = 'dark';
    await nextTick();
    expect(document.documentElement.dataset['theme']).toBe('dark');
    expect(localStorage.getItem('sidewash.device')).toContain('"theme":"dark"');
  });
});

describe('sign-in page', () => {
  async function fill(page: Awaited<ReturnType<typeof mountComponent>>): Promise<void> {
    await type(page.query<HTMLInputElement>('input[name=email]'), 'j@school.example');
    await type(page.query<HTMLInputElement>('input[name=password]'), 'secret');
    page.query<HTMLFormElement>('form').dispatchEvent(new Event('submit', { bubbles: true, cancelable: true }));
    await settle();
  }

  it('asks for what is missing before it sends anything', async () => {
    const { paths } = serve(() => ({ status: 200, body: ME }));
    const page = await mountComponent(SignInView);
    page.query<HTMLFormElement>('form').dispatchEvent(new Event('submit', { bubbles: true, cancelable: true }));
    await settle();
    expect(page.host.textContent).toContain('Enter your e-mail address');
    expect(page.host.textContent).toContain('Enter your password');
    expect(paths).toEqual(['GET /api/set-up']); // whether there is anything to set up; nothing is sent
    page.unmount();
  });

  it('goes to where the person wanted', async () => {
    serve(() => ({ status: 200, body: ME }));
    const page = await mountComponent(SignInView, { address: '/sign-in?return=/scenarios/left-cut' });
    await fill(page);
    expect(page.router.currentRoute.value.fullPath).toBe('/scenarios/left-cut');
    page.unmount();
  });

  it('gives one answer for a wrong address and a wrong password, and clears the password', async () => {
    serve(() => refusal(401, 'wrong-credentials'));
    const page = await mountComponent(SignInView);
    await fill(page);
    expect(page.query('[role=alert]').textContent).toContain('E-mail or password is wrong');
    expect(page.query<HTMLInputElement>('input[name=password]').value).toBe('');
    expect(page.query<HTMLInputElement>('input[name=email]').value).toBe('j@school.example');
    page.unmount();
  });

  it('says how long to wait after too many tries', async () => {
    serve(() => refusal(429, 'throttled', { retryAfterS: 600 }));
    const page = await mountComponent(SignInView);
    await fill(page);
    expect(page.query('[role=alert]').textContent).toContain('Wait 10 minutes');
    page.unmount();
  });
});
