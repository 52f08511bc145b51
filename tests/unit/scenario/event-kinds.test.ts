/** Every kind of event does what its words say, on each of the five shipped airframes. Limits between neighbours: ours. */
import { describe, expect, it } from 'vitest';
import { DEG, KT } from '#shared/units/constants.ts';
import type { ControlSample, Run } from '#shared/scenario/run-types.ts';
import type { ScenarioDocument } from '#shared/scenario/scenario-schema.ts';
import { airframeOf, fly, runOf } from './support/build-scenario.ts';

const TICKS = 120;
/** Speeds inside each airframe's data, well above its stall. */
const FLEET = {
  'single-trainer': { kt: 90, engines: ['centre'] },
  'light-twin': { kt: 110, engines: ['left', 'right'] },
  'commuter-turboprop': { kt: 140, engines: ['left', 'right'] },
  'twin-jet': { kt: 180, engines: ['left', 'right'] },
  'four-jet': { kt: 200, engines: ['left outer', 'left inner', 'right inner', 'right outer'] },
} as const;
type Slug = keyof typeof FLEET;
const SLUGS = Object.keys(FLEET) as Slug[]; // the keys of the object above

type Event = ScenarioDocument['events'][number];
const AT = { time_s: 1 } as const;

function flown(
  slug: Slug,
  events: readonly Event[],
  toS: number,
  input?: (sample: ControlSample, tick: number) => void,
): Run {
  const { kt, engines } = FLEET[slug];
  const run = runOf(
    {
      airframe: { slug, revision: 1 },
      start: { ias_kt: kt, height_ft: 5000, levers: engines.map(() => 0.8) },
      duration_s: 30,
      events: [...events],
    },
    airframeOf(slug),
  );
  return fly(run, toS * TICKS, input);
}
const engineOf = (slug: Slug): string => FLEET[slug].engines[0];
const failureOn = (slug: Slug): Extract<Event, { kind: 'engine-failure' }> => ({
  id: 'cut',
  lane: 'engines',
  at: AT,
  kind: 'engine-failure',
  engine: engineOf(slug),
});
const fullRight = (member: 'stick' | 'pedal') => (sample: ControlSample) => {
  sample[member] = 32767;
};

describe.each(SLUGS)('on %s', (slug) => {
  const airframe = airframeOf(slug);
  const twin = airframe.engines.length > 1;
  const failure = failureOn(slug);

  it('a failed engine gives no thrust and yaws toward its side; restored it gives all of it again', () => {
    const restore: Event = { ...failure, id: 'back', kind: 'engine-restore', at: { after: 'cut', delay_s: 9 } };
    const run = flown(slug, [failure, restore], 9);
    const { thrustN, thrustAvailableN, rRadS, engineYawNm } = run.now;
    expect(Math.abs(thrustN[0])).toBeLessThan(0.02 * thrustAvailableN[0]);
    expect(run.deadSide).toBe(twin ? 1 : 0);
    if (twin) {
      expect(engineYawNm).toBeLessThan(0);
      expect(rRadS).toBeLessThan(0);
    }
    fly(run, 24 * TICKS);
    expect(run.now.thrustN[0]).toBeGreaterThan(0.95 * run.now.thrustAvailableN[0]);
    expect(run.deadSide).toBe(0);
  });

  it('a partial failure leaves its fraction of the thrust', () => {
    const run = flown(slug, [{ ...failure, kind: 'engine-partial', fraction: 0.4 }], 8);
    expect(run.now.thrustN[0] / run.now.thrustAvailableN[0]).toBeCloseTo(0.4, 1);
  });

  it('levers go to their place in the time given', () => {
    const lever: Event = {
      id: 'l',
      lane: 'engines',
      at: AT,
      kind: 'lever',
      engine: 'all',
      position: 0.2,
      over_s: 2,
    };
    for (const [atS, position] of [
      [2, 0.5],
      [4, 0.2],
    ] as const)
      for (const one of flown(slug, [lever], atS).now.levers) expect(one).toBeCloseTo(position, 2);
  });

  it.each([
    ['right', 1],
    ['left', -1],
  ] as const)(
    'a gust from the %s is air from there: sideslip to that side at its peak, gone after it',
    (from, sign) => {
      const gust = { id: 'g', lane: 'air', at: AT, kind: 'gust', axis: 'lateral', from, peak_kt: 10 } as const;
      // The nose turns into it: weathercock stability, whatever the airframe.
      const step = flown(slug, [{ ...gust, shape: 'step' }], 1.5);
      expect(step.now.gustLateralMps).toBeCloseTo(10 * KT * -sign, 6);
      expect(step.now.rRadS * sign).toBeGreaterThan(0.2 * DEG);
      const ramp = flown(slug, [{ ...gust, shape: 'ramp', over_s: 4 }], 3);
      expect(Math.abs(ramp.now.gustLateralMps)).toBeCloseTo(5 * KT, 1);
      const hill = flown(slug, [{ ...gust, shape: 'one-minus-cosine', over_s: 1 }], 2);
      expect(Math.abs(hill.now.gustLateralMps)).toBeCloseTo(10 * KT, 0);
      expect(fly(hill, 6 * TICKS).now.gustLateralMps).toBeCloseTo(0, 6);
    },
  );

  it('gusts of yaw and roll rate act about their own axis', () => {
    const gust = { id: 'g', lane: 'air', at: AT, kind: 'gust', shape: 'step', peak_deg_s: 4 } as const;
    expect(flown(slug, [{ ...gust, axis: 'yaw-rate' }], 2).now.gustYawRadS).toBeCloseTo(4 * DEG, 6);
    expect(flown(slug, [{ ...gust, axis: 'roll-rate' }], 2).now.gustRollRadS).toBeCloseTo(4 * DEG, 6);
  });

  it('wind turns to what is said, and turbulence begins and ends', () => {
    const wind: Event = { id: 'w', lane: 'air', at: AT, kind: 'wind-change', windFrom_deg: 90, wind_kt: 20, over_s: 3 };
    const { windEastMps, windNorthMps } = flown(slug, [wind], 6).now;
    expect(windEastMps).toBeCloseTo(-20 * KT, 6);
    expect(windNorthMps).toBeCloseTo(0, 6);
    const begin: Event = { id: 'b', lane: 'air', at: AT, kind: 'turbulence', level: 'moderate' };
    const end: Event = { id: 'e', lane: 'air', at: { time_s: 10 }, kind: 'turbulence', level: 'none', over_s: 1 };
    let most = 0;
    const run = flown(slug, [begin, end], 1);
    fly(run, 10 * TICKS, () => (most = Math.max(most, Math.abs(run.now.gustLateralMps))));
    expect(most).toBeGreaterThan(0.3);
    expect(fly(run, 25 * TICKS).now.gustLateralMps).toBeCloseTo(0, 3);
  });

  it('jammed surfaces stay, where they are or where it is said, whatever the pilot does, until restored', () => {
    const jam = (kind: 'rudder-jam' | 'aileron-jam', at_deg?: number): Event => ({
      id: 'j',
      lane: 'controls',
      at: AT,
      kind,
      ...(at_deg !== undefined && { at_deg }),
    });
    const restored: Event = { id: 'r', lane: 'controls', at: { time_s: 4 }, kind: 'controls-restore' };
    const rudder = flown(slug, [jam('rudder-jam'), restored], 1);
    const { rudderRad } = rudder.now;
    fly(rudder, 3.9 * TICKS, fullRight('pedal'));
    expect(rudder.now.rudderRad).toBeCloseTo(rudderRad, 6);
    fly(rudder, 5 * TICKS, fullRight('pedal'));
    expect(Math.abs(rudder.now.rudderRad - rudderRad)).toBeGreaterThan(2 * DEG);
    expect(flown(slug, [jam('rudder-jam', 5)], 3, fullRight('pedal')).now.rudderRad).toBeCloseTo(5 * DEG, 3);
    expect(flown(slug, [jam('aileron-jam', -3)], 3, fullRight('stick')).now.aileronRad).toBeCloseTo(-3 * DEG, 3);
  });

  it.each([
    ['right', 1],
    ['left', -1],
  ] as const)('a rudder hard over to the %s yaws the nose to that side', (to, sign) => {
    const { rRadS, rudderRad } = flown(
      slug,
      [{ id: 'h', lane: 'controls', at: AT, kind: 'rudder-hardover', to }],
      1.6,
    ).now;
    expect(rRadS * sign).toBeGreaterThan(2 * DEG);
    expect(rudderRad * sign).toBeLessThan(-2 * DEG);
  });

  it('half the aileron rolls about half as fast', () => {
    const rate = (events: readonly Event[]): number =>
      flown(slug, events, 1.6, (sample, tick) => {
        sample.stick = tick > 1.1 * TICKS ? 16000 : 0;
      }).now.pRadS;
    const half = rate([{ id: 'h', lane: 'controls', at: AT, kind: 'aileron-half' }]);
    expect(half / rate([])).toBeGreaterThan(0.4);
    expect(half / rate([])).toBeLessThan(0.6);
  });

  it('rudder trim goes to its place in its time', () => {
    const trim: Event = { id: 't', lane: 'controls', at: AT, kind: 'rudder-trim', deg: 4, over_s: 2 };
    const before = flown(slug, [], 5).now.rudderRad;
    expect(flown(slug, [trim], 5).now.rudderRad / DEG).not.toBeCloseTo(before / DEG, 0);
  });

  it('scripted inputs: a step stays, a pulse ends, a doublet goes both ways, a ramp takes its time', () => {
    const input = { id: 'i', lane: 'controls', at: AT, kind: 'input', axis: 'pedal', amplitude: 0.2 } as const;
    const pedal = (shape: 'step' | 'pulse' | 'doublet' | 'ramp', atS: number): number =>
      flown(slug, [{ ...input, shape, ...(shape !== 'step' && { duration_s: 1 }) }], atS).now.pedal;
    expect([pedal('step', 1.5), pedal('step', 9)]).toEqual([0.2, 0.2].map((v) => expect.closeTo(v, 6)));
    expect([pedal('pulse', 1.5), pedal('pulse', 2.5)]).toEqual([0.2, 0].map((v) => expect.closeTo(v, 6)));
    expect([pedal('doublet', 1.5), pedal('doublet', 2.5), pedal('doublet', 3.5)]).toEqual(
      [0.2, -0.2, 0].map((v) => expect.closeTo(v, 6)),
    );
    expect([pedal('ramp', 1.5), pedal('ramp', 4)]).toEqual([0.1, 0.2].map((v) => expect.closeTo(v, 2)));
  });

  it('the pitch assistant slows down as told, and climbs as told', () => {
    const { kt } = FLEET[slug];
    const slow: Event = {
      id: 's',
      lane: 'systems',
      at: AT,
      kind: 'pitch-mode',
      mode: 'decelerate',
      rate_kt_s: 1,
      target_kt: kt - 8,
    };
    expect(Math.abs(flown(slug, [slow], 28).now.casMps / KT - (kt - 8))).toBeLessThan(1.6);
    const climb: Event = { id: 'c', lane: 'systems', at: AT, kind: 'pitch-mode', mode: 'hold-path', path_deg: 2 };
    expect(flown(slug, [climb], 12).now.thetaRad / DEG).toBeCloseTo(2, 0);
  });

  it('a configuration is changed to while the aeroplane flies on', () => {
    const name = airframe.configurations.at(-1)?.name ?? '';
    const run = flown(slug, [{ id: 'c', lane: 'systems', at: AT, kind: 'configuration', name }], 10);
    expect(run.ended).toBeNull();
    expect(run.fired.map(({ text }) => text)).toEqual([`Configuration changes to ${name}`]);
  });

  it('messages are shown for their time, indications fail and come back, a freeze stops the clock once', () => {
    const events: Event[] = [
      { id: 'm', lane: 'notes', at: AT, kind: 'message', text: 'Look out', duration_s: 2 },
      { id: 'd', lane: 'systems', at: AT, kind: 'display', indication: 'height', state: 'frozen' },
      {
        id: 'n',
        lane: 'systems',
        at: { after: 'd', delay_s: 1 },
        kind: 'display',
        indication: 'height',
        state: 'normal',
      },
      { id: 'f', lane: 'notes', at: { time_s: 4 }, kind: 'freeze', text: 'Why?' },
    ];
    const run = flown(slug, events, 1.5);
    expect(run.messages.map(({ text }) => text)).toEqual(['Look out']);
    expect(run.display['height']).toBe('frozen');
    expect(fly(run, 3.1 * TICKS).messages).toEqual([]);
    expect(run.display['height']).toBe('normal');
    let stops = 0;
    fly(run, 6 * TICKS, () => (stops += run.freezeRequested ? 1 : 0));
    expect(stops).toBe(1);
  });
});

describe.each(SLUGS.filter((slug) => airframeOf(slug).engines[0].kind === 'propeller'))(
  'with propellers, %s',
  (slug) => {
    it('a feathered propeller drags less than a windmilling one, at the cut or by an event', () => {
      const failure = failureOn(slug);
      const drag = (events: readonly Event[]): number => Math.abs(flown(slug, events, 20).now.windmillDragN[0]);
      const windmilling = drag([failure]);
      const autofeather = drag([{ ...failure, propeller: 'feathered' }]);
      const byEvent = drag([failure, { ...failure, id: 'f', kind: 'feather', at: { after: 'cut', delay_s: 2 } }]);
      expect(windmilling).toBeGreaterThan(0);
      expect(autofeather).toBeLessThan(0.5 * windmilling);
      expect(byEvent).toBeLessThan(0.5 * windmilling);
    });
  },
);

describe.each(SLUGS.filter((slug) => airframeOf(slug).yawDamper !== undefined))('with a yaw damper, %s', (slug) => {
  it('the yaw damper is switched off, and on again', () => {
    const gust: Event = { id: 'g', lane: 'air', at: AT, kind: 'gust', axis: 'yaw-rate', shape: 'step', peak_deg_s: 4 };
    const off: Event = { id: 'off', lane: 'systems', at: { time_s: 0.5 }, kind: 'yaw-damper', on: false };
    const on: Event = { id: 'on', lane: 'systems', at: { time_s: 2 }, kind: 'yaw-damper', on: true };
    expect(Math.abs(flown(slug, [gust], 1.8).now.yawDamperRad)).toBeGreaterThan(1e-4);
    expect(flown(slug, [off, gust], 1.8).now.yawDamperRad).toBe(0);
    expect(Math.abs(flown(slug, [off, on, gust], 3).now.yawDamperRad)).toBeGreaterThan(1e-4);
  });
});

describe.each(SLUGS.filter((slug) => airframeOf(slug).controls.rudderRatio !== undefined))(
  'with a rudder ratio, %s',
  (slug) => {
    it('a stuck rudder ratio stays while the speed falls', () => {
      const slow: Event = { id: 's', lane: 'systems', at: AT, kind: 'pitch-mode', mode: 'decelerate', rate_kt_s: 2 };
      const stuck: Event = { id: 'k', lane: 'systems', at: AT, kind: 'rudder-ratio', state: 'stuck' };
      const run = flown(slug, [slow, stuck], 1.1);
      const ratio = run.now.rudderRatio;
      expect(fly(run, 15 * TICKS).now.rudderRatio).toBe(ratio);
      expect(flown(slug, [slow], 15).now.rudderRatio).toBeGreaterThan(ratio + 0.02);
    });
  },
);
