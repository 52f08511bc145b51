import { describe, expect, it } from 'vitest';
import { createRun } from '#shared/scenario/run.ts';
import { ScenarioError } from '#shared/scenario/scenario-errors.ts';
import type { ScenarioDocument } from '#shared/scenario/scenario-schema.ts';
import { drawValues } from '#shared/scenario/variation.ts';
import { DEG } from '#shared/units/constants.ts';
import { airframeOf, cutLeft, fly, runOf, scenarioOf, specOf } from './support/build-scenario.ts';

type Event = NonNullable<ScenarioDocument['events']>[number];
const marker = (id: string, at: Event['at']): Event => ({ id, lane: 'notes', kind: 'marker', text: id, at });
const firedAt = (run: ReturnType<typeof runOf>): string[] => run.fired.map(({ id, tick }) => `${id}@${tick}`);

describe('triggers', () => {
  it('by time snap to the nearest tick', () => {
    const run = fly(
      runOf({ events: [marker('a', { time_s: 1 }), marker('b', { time_s: 0.0124 }), marker('c', { time_s: 0.0126 })] }),
    );
    expect(firedAt(run)).toEqual(['b@1', 'c@2', 'a@120']);
    expect(run.fired[2]).toMatchObject({ timeS: 1, lane: 'notes', kind: 'marker', text: 'a', injected: false });
  });

  it('fire in array order within a tick; a chain without delay fires at the next tick, whatever its place', () => {
    const events = [
      marker('c', { after: 'b' }),
      marker('b', { after: 'a' }),
      marker('a', { time_s: 0.5 }),
      marker('d', { time_s: 0.5 }),
    ];
    expect(firedAt(fly(runOf({ events })))).toEqual(['a@60', 'd@60', 'b@61', 'c@62']);
    const turned = [marker('a', { time_s: 0.5 }), marker('b', { after: 'a' }), marker('c', { after: 'b', delay_s: 1 })];
    expect(firedAt(fly(runOf({ events: turned })))).toEqual(['a@60', 'b@61', 'c@181']);
  });

  it('on a condition fire once, on the first tick where it is true', () => {
    const run = runOf({
      events: [
        marker('a', { when: 't > 1 s' }),
        marker('b', { when: 'since(a) >= 0.5 s' }),
        marker('c', { when: 'pedal > 40 %' }),
      ],
    });
    fly(run, Infinity, (sample, tick) => {
      sample.pedal = tick === 30 ? 16384 : 0;
    });
    expect(firedAt(run)).toEqual(['c@30', 'a@121', 'b@181']);
  });

  it('on a condition that reads an event which never comes do not fire', () => {
    const run = fly(
      runOf({ events: [marker('never', { time_s: 60 }), marker('b', { when: 'not since(never) > 1 s' })] }),
    );
    expect(run.fired).toEqual([]);
    expect(run.warnings.join(' ')).toContain('The event "never" did not fire.');
  });

  it('know the computed speeds of the start', () => {
    // Light twin, take-off, sea level: minimum control speed 66.3 kt, stall 60.5 kt (flight model, section 9).
    const start = { ias_kt: 90, height_ft: 1, levers: [1, 1] };
    const near = (name: string, low: number, high: number): string => `${name} > ${low} kt and ${name} < ${high} kt`;
    const run = runOf({
      start,
      duration_s: 0.1,
      events: [marker('vmc', { when: near('vmc', 66.2, 66.4) }), marker('stall', { when: near('stall', 60.4, 60.6) })],
    });
    expect(firedAt(fly(run, 2))).toEqual(['vmc@0', 'stall@0']);
  });
});

describe('a run', () => {
  it('reads the input of a tick before its triggers and flies it over the tick', () => {
    const run = runOf({ events: [marker('a', { when: 'stick < -0.5' })] });
    const sample = run.neutralSample();
    sample.stick = -32767;
    run.step(sample);
    expect(firedAt(run)).toEqual(['a@0']);
    expect(run.now.aileronRad).toBeLessThan(0);
  });

  it('is completed after its duration, to the tick', () => {
    const run = fly(runOf({ duration_s: 2.5 }));
    expect([run.ended, run.tick, run.timeS, run.durationTicks]).toEqual(['completed', 300, 2.5, 300]);
    run.step(run.neutralSample());
    expect(run.tick).toBe(300);
  });

  it('ends at the ground without a runway, by touchdown with one', () => {
    const down = { automation: { pitch: { mode: 'hold-path', path_deg: -6 } }, duration_s: 60 } as const;
    const start = { ias_kt: 100, height_ft: 100, levers: [0.2, 0.2] };
    const ground = fly(runOf({ ...down, start }));
    expect(ground.ended).toBe('ground');
    expect(ground.now.heightM).toBeLessThanOrEqual(0);
    const landed = fly(runOf({ ...down, start, runway: { threshold_m: 0, gearHeight_m: 2 } }));
    expect(landed.ended).toBe('touchdown');
    expect(landed.now.heightAboveRunwayM).toBeLessThanOrEqual(2);
    const high = fly(
      runOf({ ...down, start: { ...start, height_ft: 1100 }, runway: { threshold_m: 0, elevation_ft: 1000 } }),
    );
    expect(high.ended).toBe('touchdown');
    expect(high.now.heightM).toBeGreaterThan(300);
  });

  it('that was left is not passed, and its results are final', () => {
    const run = runOf({ criteria: [{ id: 'b', title: 'Bank', measure: 'bank', limit: { max: 20, unit: 'deg' } }] });
    fly(run, 60);
    expect(run.passed()).toBe(true);
    run.leave();
    expect([run.ended, run.passed(), run.results()[0].verdict]).toEqual(['left', false, 'met']);
    run.step(run.neutralSample());
    expect(run.tick).toBe(60);
  });

  it('stops at the last good tick when a state is not finite, names it, and keeps its hash', () => {
    const run = runOf({});
    fly(run, 30);
    const hash = run.stateHash();
    run.plant.x[6] = NaN; // the true airspeed: no input brings this about
    run.step(run.neutralSample());
    expect([run.ended, run.tick, run.passed()]).toEqual(['non-finite', 30, false]);
    expect(run.endDetail).toMatch(/tick 31: .*not finite/u);
    expect(run.stateHash()).toBe(hash);
  });

  it('takes messages, freezes and display failures from events', () => {
    const events: Event[] = [
      { id: 'm', lane: 'notes', kind: 'message', text: 'Look out', duration_s: 1, at: { time_s: 1 } },
      { id: 'f', lane: 'notes', kind: 'freeze', text: 'Talk', at: { time_s: 1.5 } },
      { id: 'd', lane: 'systems', kind: 'display', indication: 'airspeed', state: 'failed', at: { time_s: 2 } },
      { id: 'n', lane: 'systems', kind: 'display', indication: 'airspeed', state: 'normal', at: { time_s: 3 } },
    ];
    const run = runOf({ events });
    fly(run, 130);
    expect(run.messages.map(({ text }) => text)).toEqual(['Look out']);
    fly(run, 180);
    expect(run.freezeRequested).toBe(false);
    fly(run, 181);
    expect(run.freezeRequested).toBe(true);
    fly(run, 250);
    expect([run.freezeRequested, run.messages.length, run.display.airspeed]).toEqual([false, 0, 'failed']);
    fly(run, 370);
    expect(run.display.airspeed).toBe('normal');
  });

  it('adds scripted inputs to the pilot and limits the sum', () => {
    const input = (shape: 'pulse' | 'doublet' | 'ramp' | 'step', amplitude: number): Event => ({
      id: shape,
      lane: 'controls',
      kind: 'input',
      axis: 'pedal',
      shape,
      amplitude,
      duration_s: 0.5,
      at: { time_s: 1 },
    });
    const pedalAt = (event: Event, ticks: number[], pilot = 0): number[] => {
      const run = runOf({ events: [event] });
      return ticks.map((tick) => {
        fly(run, tick + 1, (sample) => {
          sample.pedal = pilot;
        });
        return run.plant.inputs.pedal;
      });
    };
    expect(pedalAt(input('pulse', 0.5), [119, 120, 179, 180])).toEqual([0, 0.5, 0.5, 0]);
    expect(pedalAt(input('doublet', 0.5), [120, 179, 180, 239, 240])).toEqual([0.5, 0.5, -0.5, -0.5, 0]);
    expect(pedalAt(input('ramp', 0.6), [120, 150, 180, 600])).toEqual([0, 0.3, 0.6, 0.6]);
    expect(pedalAt(input('step', 0.5), [120, 600])).toEqual([0.5, 0.5]);
    expect(pedalAt(input('step', 0.8), [130], 16384)).toEqual([1]);
  });

  it('overrides a lever until the pilot moves it', () => {
    const event: Event = {
      id: 'l',
      lane: 'engines',
      kind: 'lever',
      engine: 'left',
      position: 0,
      over_s: 0,
      at: { time_s: 0.5 },
    };
    const run = runOf({ events: [event] });
    fly(run, 120);
    expect([...run.now.levers]).toEqual([0, 1]);
    fly(run, 240, (sample) => {
      sample.levers[0] = 16384;
    });
    expect(run.now.levers[0]).toBeCloseTo(0.5, 4);
  });

  it('knows the dead side from the first tick of a failure, also for several engines', () => {
    const side = (slug: string, ...engines: string[]): number => {
      const airframe = airframeOf(slug);
      const start = slug === 'light-twin' ? { ias_kt: 100, height_ft: 2000 } : { ias_kt: 220, height_ft: 5000 };
      const events = engines.map((engine, i): Event => ({
        id: `e${i}`,
        lane: 'engines',
        kind: 'engine-failure',
        engine,
        at: { time_s: 0 },
      }));
      return fly(runOf({ start, events, duration_s: 5 }, airframe), 1).deadSide;
    };
    expect(side('light-twin')).toBe(0);
    expect(side('light-twin', 'left')).toBe(1);
    expect(side('light-twin', 'right')).toBe(-1);
    expect(side('four-jet', 'left outer', 'right inner')).toBe(1);
    expect(side('four-jet', 'left inner', 'right inner')).toBe(0);
    expect(side('four-jet', 'left inner', 'right outer')).toBe(-1);
  });

  it('shows the same observation whoever looks, and when', () => {
    const quiet = runOf({ events: [cutLeft] });
    const watched = runOf({ events: [cutLeft] });
    const { now } = watched;
    fly(quiet, 400);
    while (watched.tick < 400) {
      watched.step(watched.neutralSample());
      watched.criteria();
      expect(now.tick).toBe(watched.tick);
    }
    expect(watched.now).toBe(now);
    expect(watched.stateHash()).toBe(quiet.stateHash());
    expect({ ...watched.now }).toEqual({ ...quiet.now });
  });

  it('refuses a scenario that does not fit its airframe', () => {
    const scenario = scenarioOf({ events: [{ ...cutLeft, engine: 'middle' }] });
    expect(() => createRun({ scenario, airframe: airframeOf('light-twin'), seed: 1 })).toThrow(ScenarioError);
  });

  it('without hash and watch gives the same results', () => {
    const criteria: ScenarioDocument['criteria'] = [
      { id: 'h', title: 'h', measure: 'heading-deviation', limit: { max: 20, unit: 'deg' } },
      { id: 's', title: 's', measure: 'speed-loss', limit: { max: 20, unit: 'kt' } },
      { id: 'b', title: 'b', measure: 'ball', limit: { max: 2, unit: 'widths' } },
    ];
    const spec = specOf({ events: [cutLeft], criteria });
    const lean = fly(createRun(spec, { lean: true }));
    expect(lean.results()).toEqual(fly(createRun(spec)).results());
    expect(() => lean.stateHash()).toThrow(ScenarioError);
  });
});

describe('injected events', () => {
  it('fire at once when their time has passed, else at their own trigger', () => {
    const run = runOf({ events: [marker('a', { time_s: 1 })] });
    fly(run, 200);
    run.inject({
      id: 'now',
      lane: 'engines',
      kind: 'engine-failure',
      engine: 'left',
      propeller: 'windmilling',
      at: { time_s: 0 },
    });
    run.inject({ id: 'later', lane: 'notes', kind: 'marker', text: 'x', at: { after: 'now', delay_s: 0.5 } });
    fly(run, 300);
    expect(firedAt(run)).toEqual(['a@120', 'now@200', 'later@260']);
    expect(run.fired[1]).toMatchObject({ injected: true, text: 'Left engine fails' });
    expect(run.deadSide).toBe(1);
  });

  it('are refused when they do not fit', () => {
    const run = runOf({ events: [marker('a', { time_s: 1 })] });
    expect(() => run.inject({ id: 'a', lane: 'notes', kind: 'marker', text: 'x', at: { time_s: 1 } })).toThrow(
      /already/u,
    );
    expect(() =>
      run.inject({ id: 'b', lane: 'notes', kind: 'marker', text: 'x', at: { after: 'z', delay_s: 0 } }),
    ).toThrow(/"z"/u);
    expect(() =>
      run.inject({ id: 'b', lane: 'notes', kind: 'marker', text: 'x', at: { when: 'since(z) > 1 s' } }),
    ).toThrow(/since\(z\)/u);
    expect(() => run.inject({ id: 'b', lane: 'notes', kind: 'marker', text: 'x', at: { when: 'ias < 3' } })).toThrow(
      /character 7/u,
    );
    expect(() =>
      run.inject({ id: 'b', lane: 'engines', kind: 'feather', engine: 'middle', at: { time_s: 0 } }),
    ).toThrow(/middle/u);
  });

  it('given with the run give the run that injected them live', () => {
    const event = {
      id: 'x',
      lane: 'engines',
      kind: 'engine-failure',
      engine: 'right',
      propeller: 'windmilling',
      at: { time_s: 0 },
    } as const;
    const live = runOf({});
    fly(live, 150);
    live.inject(event);
    fly(live);
    const again = fly(createRun({ ...specOf({}), injected: [{ tick: 150, event, until: null }] }));
    expect(again.stateHash()).toBe(live.stateHash());
    expect(firedAt(again)).toEqual(firedAt(live));
  });
});

describe('variation', () => {
  const varied = (id: string, extra: Event[] = []): ScenarioDocument['events'] => [
    ...extra,
    { ...cutLeft, id, vary: { time_s: [2, 4] } },
  ];
  it('is drawn from a stream of the event: another event changes nothing', () => {
    const alone = drawValues(scenarioOf({ events: varied('cut') }), 7);
    const gust: Event = {
      id: 'g',
      lane: 'air',
      kind: 'gust',
      axis: 'lateral',
      from: 'left',
      peak_kt: 10,
      shape: 'step',
      at: { time_s: 1 },
      vary: { peak_kt: [5, 15], time_s: [0, 1] },
    };
    const both = drawValues(scenarioOf({ events: varied('cut', [gust]) }), 7);
    expect(both.cut).toEqual(alone.cut);
    expect(Object.keys(both.g).sort()).toEqual(['peak_kt', 'time_s']);
    expect(drawValues(scenarioOf({ events: varied('cut') }), 8).cut).not.toEqual(alone.cut);
  });
  it('spreads evenly over its range', () => {
    const draws = Array.from(
      { length: 400 },
      (_, seed) => drawValues(scenarioOf({ events: varied('cut') }), seed).cut.time_s,
    );
    expect(Math.min(...draws)).toBeGreaterThanOrEqual(2);
    expect(Math.max(...draws)).toBeLessThanOrEqual(4);
    // Mean of 400 uniform draws on [2, 4]: 3 ± 4 standard errors of 0.029.
    expect(Math.abs(draws.reduce((a, b) => a + b) / 400 - 3)).toBeLessThan(0.12);
  });
  it('decides when the event fires, and given values win', () => {
    const spec = specOf({ events: varied('cut'), seed: 7 });
    const run = fly(createRun(spec));
    expect(run.fired[0].tick).toBe(Math.round(run.drawn.cut.time_s * 120));
    const given = fly(createRun({ ...spec, drawn: { cut: { time_s: 2.5 } } }));
    expect(given.fired[0].tick).toBe(300);
  });
});

it('north is exactly north: heading 360 starts at 0', () => {
  expect(runOf({ start: { ias_kt: 100, height_ft: 2000, heading_deg: 360 } }).now.psiRad).toBe(0);
  expect(runOf({ start: { ias_kt: 100, height_ft: 2000, heading_deg: 270 } }).now.psiRad).toBeCloseTo(-90 * DEG, 12);
});
