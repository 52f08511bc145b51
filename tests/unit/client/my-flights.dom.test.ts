import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import MyFlightsView from '../../../src/views/my-flights/MyFlightsView.vue';
import { flownLibrary } from './flown-library.ts';
import { type Mounted, mountComponent, settle } from './mount-component.ts';

const library = flownLibrary();
const page = (items: unknown[], total = items.length) => ({ items, page: 1, pageSize: 6, total });

/** Answers by path; null is a fault of the server. Keeps the addresses asked for. */
function serve(answers: Record<string, unknown>): string[] {
  const asked: string[] = [];
  vi.stubGlobal('fetch', async (input: string) => {
    asked.push(input);
    const path = input.split('?')[0] ?? '';
    const body = answers[path];
    if (body === undefined || body === null) {
      const problem = {
        type: 'about:blank',
        title: 'internal',
        status: 500,
        code: 'internal',
        detail: 'It broke here.',
      };
      return new Response(JSON.stringify(problem), { status: 500 });
    }
    return new Response(JSON.stringify(body), { status: 200 });
  });
  return asked;
}

const FLOWN = {
  '/api/scenarios': page([library.summary], 8),
  [`/api/scenarios/${library.summary.slug}`]: library.revision,
  '/api/assignments/mine': [],
  '/api/attempts': page([library.attempt]),
  '/api/remarks': page([
    {
      id: '5f3c1d1e-2b9a-4f6e-9d0c-0a1b2c3d4e5f',
      attemptId: library.attempt.id,
      scenarioSlug: library.summary.slug,
      scenarioTitle: library.summary.title,
      tick: 564,
      text: 'Hold, then trim.',
      author: 'M. Okafor',
      at: '2026-11-30T10:00:00.000Z',
    },
  ]),
  [`/api/attempts/${library.attempt.id}`]: library.detail,
  [`/api/attempts/${library.attempt.id}/chunks`]: library.chunks,
};

let shown: Mounted;
async function open(address = '/my-flights'): Promise<string> {
  shown = await mountComponent(MyFlightsView, { address });
  await settle(20);
  return text();
}
const text = (): string => (shown.host.textContent ?? '').replace(/\s+/g, ' ');

beforeEach(() => localStorage.clear());
afterEach(() => {
  shown.unmount();
  vi.unstubAllGlobals();
});

describe('My flights', () => {
  it('shows the next flight, how it stands, and the limit of the first pedal', async () => {
    serve(FLOWN);
    const words = await open();
    expect(shown.query('h1').textContent).toBe('Left engine cut after lift-off');
    expect(words).toContain('Not met yet');
    expect(words).toContain('Pedal within2.0 s');
    expect([...shown.host.querySelectorAll('a')].map((link) => link.getAttribute('href'))).toContain(
      `/fly/${library.summary.slug}`,
    );
  });

  it('integrates the replay again for its balance strip: hands off, it hangs toward the dead side', async () => {
    serve(FLOWN);
    await open();
    await vi.waitFor(() => expect(shown.host.querySelector('[aria-label^="Balance strip"]')).not.toBeNull(), 5000);
    expect(shown.query('[aria-label^="Balance strip"]').getAttribute('aria-label')).toBe(
      'Balance strip: toward dead side',
    );
    // Left engine out, nobody on the pedals: the nose goes left, so the flight path lies right of it.
    expect(text()).toMatch(/Your attempt 1, 2\.0 s after the first event: flight path \d+\.\d° right of the nose/);
  });

  it('marks a pedal that never came, in the chart and in the margins', async () => {
    serve(FLOWN);
    const words = await open();
    expect(words).toContain('First correct pedal, one attempt');
    expect(shown.host.querySelectorAll('svg text.never')).toHaveLength(1);
    expect(words).toMatch(/First correct pedal\s*never/);
  });

  it('shows the remarks of instructors, each leading to its moment of the replay', async () => {
    serve(FLOWN);
    expect(await open()).toContain('Hold, then trim.');
    // Tick 564 at 120 a second.
    expect(shown.query('a[href$="?t=4.7"]').getAttribute('href')).toBe(`/attempts/${library.attempt.id}?t=4.7`);
  });

  it('asks the server for pages and keeps the page in the address', async () => {
    const asked = serve(FLOWN);
    await open('/my-flights?list=2');
    expect(asked.some((path) => path.startsWith('/api/scenarios?') && path.includes('page=2'))).toBe(true);
    expect(asked.some((path) => path.startsWith('/api/attempts?') && path.includes('sort=-startedAt'))).toBe(true);
  });

  it('says what comes once there is something to show', async () => {
    serve({ ...FLOWN, '/api/attempts': page([]) });
    const words = await open();
    expect(words).toContain('Nothing flown yet.');
    expect(words).toContain('Margins appear after the first attempt.');
  });

  it('fails figure by figure and recovers on request', async () => {
    serve({ ...FLOWN, '/api/attempts': null });
    expect(await open()).toContain('Left engine cut after lift-off');
    const alerts = [...shown.host.querySelectorAll('[role=alert]')];
    expect(alerts.map((alert) => alert.textContent)).toContainEqual(expect.stringContaining('It broke here.'));
    serve(FLOWN);
    alerts.forEach((alert) => alert.querySelector('button')?.click());
    await settle(20);
    expect(shown.host.querySelectorAll('[role=alert]')).toHaveLength(0);
    expect(text()).toContain('attempt 1');
  });
});
