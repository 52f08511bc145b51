import { afterEach, describe, expect, it } from 'vitest';
import { type App, type Component, createApp, h, nextTick, ref } from 'vue';
import { DEG, FT, KT } from '#shared/units/constants.ts';
import BalanceStrip from '../../../src/components/instruments/BalanceStrip.vue';
import CriteriaMargins from '../../../src/components/instruments/CriteriaMargins.vue';
import EventTicker from '../../../src/components/instruments/EventTicker.vue';
import StageFrame from '../../../src/components/instruments/StageFrame.vue';
import ReplayScrubber from '../../../src/components/timeline/ReplayScrubber.vue';
import FlightButtons from '../../../src/features/fly/FlightButtons.vue';
import { observation } from './fakes.ts';

let app: App | null = null;
let place: HTMLElement;

/** Mounts one component; `exposed` is what it exposes. */
function mount<T>(component: Component, props: () => Record<string, unknown>): { exposed: T; place: HTMLElement } {
  place = document.createElement('div');
  document.body.append(place);
  const held = ref<unknown>(null);
  app = createApp({ render: () => h(component, { ...props(), ref: held }) });
  app.mount(place);
  return { exposed: held.value as T, place }; // the component exposes what the test names
}
afterEach(() => {
  app?.unmount();
  place.remove();
});

const dead = observation({
  timeS: 5,
  tick: 600,
  betaRad: 8.2 * DEG,
  ballWidths: 2.2,
  pedal: 0.49,
  rudderRad: -0.15,
  rudderMaxRad: 0.4,
  rudderAvailableRad: 0.4,
  phiRad: -5.4 * DEG,
  psiRad: 260 * DEG,
  trackRad: 275 * DEG,
  casMps: 112 * KT,
  heightAboveRunwayM: 62 * FT,
});
const wanted = { found: true, betaRad: 0, ballWidths: 0.6, pedal: 0.58, phiRad: 2.5 * DEG };

describe('balance strip', () => {
  it('shows sides, what is wanted, the verdict and says the remedy', async () => {
    const { exposed, place } = mount<InstanceType<typeof BalanceStrip>>(BalanceStrip, () => ({}));
    exposed.update(dead, wanted, 1);
    await nextTick();
    const read = (name: string) => place.querySelector(`[data-readout="${name}"]`)?.textContent;
    expect(read('nose')).toBe('8.2°L');
    expect(read('pedal')).toBe('49%R');
    expect(read('pedal-wanted')).toBe('58%R');
    expect(read('wings')).toBe('5.4°L');
    expect(place.textContent).toContain('Toward dead side');
    expect(place.querySelector('[role=status]')?.textContent).toBe('Toward dead side: more right pedal');
  });

  it('holds what it showed when frozen and shows nothing when failed', async () => {
    const indication = ref<'normal' | 'frozen' | 'failed'>('normal');
    const { exposed, place } = mount<InstanceType<typeof BalanceStrip>>(BalanceStrip, () => ({
      indication: indication.value,
    }));
    exposed.update(dead, wanted, 1);
    indication.value = 'frozen';
    await nextTick();
    exposed.update({ ...dead, betaRad: 0 }, wanted, 1);
    expect(place.querySelector('[data-readout="nose"]')?.textContent).toBe('8.2°L');
    expect(place.textContent).toContain('Balance indication frozen');
    indication.value = 'failed';
    await nextTick();
    expect(place.querySelector('[data-readout="nose"]')).toBeNull();
    expect(place.textContent).toContain('Balance indication failed');
  });
});

describe('stage frame', () => {
  it('reads speed, height, nose, path and track, in either system of units', async () => {
    const units = ref<'aviation' | 'si'>('aviation');
    const { exposed, place } = mount<InstanceType<typeof StageFrame>>(StageFrame, () => ({
      units: units.value,
      speeds: [{ name: 'Vmca', casMps: 91 * KT, floor: true }],
    }));
    exposed.update(dead, 1);
    await nextTick();
    expect(place.textContent).toContain('112 kt');
    expect(place.textContent).toContain('62 ft');
    expect(place.textContent).toContain('nose 260');
    expect(place.textContent).toContain('path 268');
    expect(place.textContent).toContain('track 275');
    expect(place.textContent).toContain('Vmca 91');
    units.value = 'si';
    await nextTick();
    exposed.update(dead, 1);
    expect(place.textContent).toContain('58 m/s');
    expect(place.textContent).toContain('19 m');
  });

  it('marks a failed indication and removes its value', async () => {
    const { exposed, place } = mount<InstanceType<typeof StageFrame>>(StageFrame, () => ({
      units: 'aviation',
      speeds: [],
      airspeed: 'failed',
    }));
    exposed.update(dead, 1);
    await nextTick();
    expect(place.textContent).toContain('Airspeed failed');
    expect(place.textContent).not.toContain('112 kt');
  });
});

describe('criteria, ticker, buttons, scrubber', () => {
  it('a criterion shows its margin and state, and a waiting one says so', async () => {
    const criteria = [
      { id: 'a', title: 'Heading within 20°', limit: { max: 20, unit: 'deg' }, required: true },
      { id: 'b', title: 'Pedal within 2 s', limit: { max: 2, unit: 's' }, required: true },
    ];
    const { exposed, place } = mount<InstanceType<typeof CriteriaMargins>>(CriteriaMargins, () => ({ criteria }));
    const base = { measure: 'x', atS: 1 };
    exposed.update([
      { ...criteria[0], ...base, value: 25.4, now: 3, margin: -5.4, verdict: 'not-met', phase: 'running' },
      { ...criteria[1], ...base, value: null, now: null, margin: null, verdict: 'not-reached', phase: 'waiting' },
    ]);
    await nextTick();
    expect(place.textContent).toContain('−5.4°');
    expect(place.textContent).toContain('now 3.0, worst 25.4');
    expect(place.textContent).toContain('not begun');
    expect(place.querySelectorAll('.name.not').length).toBe(1);
  });

  it('the ticker lists the newest first and is a polite log', () => {
    const { place } = mount(EventTicker, () => ({
      lines: [
        { id: '1', timeS: 0, text: 'Left engine fails', kind: 'failure' },
        { id: '2', timeS: 1.7, text: 'Right pedal begins', kind: 'plain' },
      ],
    }));
    expect(place.querySelector('[role=log]')?.getAttribute('aria-live')).toBe('polite');
    expect([...place.querySelectorAll('li')].map((li) => li.textContent?.replace(/\s+/g, ' ').trim())).toEqual([
      '+01.7 Right pedal begins',
      '00.0 Left engine fails',
    ]);
  });

  it('leaving asks once more, since the try counts', async () => {
    let left = 0;
    const { place } = mount(FlightButtons, () => ({
      phase: 'running',
      allowFreeze: false,
      allowSlow: false,
      rate: 1,
      starting: false,
      onLeave: () => (left += 1),
    }));
    const button = place.querySelector('button');
    button?.click();
    await nextTick();
    expect(left).toBe(0);
    expect(button?.textContent).toContain('Press again');
    button?.click();
    expect(left).toBe(1);
  });

  it('the scrubber moves by keys and stays inside', () => {
    const sought: number[] = [];
    const { exposed, place } = mount<InstanceType<typeof ReplayScrubber>>(ReplayScrubber, () => ({
      durationS: 15,
      zeroS: 3,
      hasEvent: true,
      flags: [],
      phases: [],
      valueS: 4,
      onSeek: (t: number) => sought.push(Math.round(t * 10) / 10),
    }));
    exposed.place(4);
    const slider = place.querySelector('[role=slider]');
    const press = (key: string, shiftKey = false) =>
      slider?.dispatchEvent(new KeyboardEvent('keydown', { key, shiftKey, bubbles: true }));
    press('ArrowRight');
    press('ArrowLeft', true);
    press('PageDown');
    press('End');
    // Each step counts from the one before, also within one frame.
    expect(sought).toEqual([4.1, 3.1, 0, 15]);
    expect(slider?.getAttribute('aria-valuetext')).toBe('1.0 seconds after the event');
  });
});
