import { describe, expect, it } from 'vitest';
import type { Run } from '#shared/scenario/run-types.ts';
import type { ScenarioDocument } from '#shared/scenario/scenario-schema.ts';
import { MEASURE_TABLE } from '#shared/scenario/measures/measure-table.ts';
import { fly, runOf } from './support/build-scenario.ts';

/** Everything at once: noise, failures, chains, scripted input, and every measure there is. */
function busyRun(): Run {
  const criteria = Object.entries(MEASURE_TABLE).map(([measure, spec]) => ({
    id: measure,
    title: measure,
    measure: measure as keyof typeof MEASURE_TABLE,
    from: measure === 'climb-rate' ? 'start' : 'cut',
    to: measure === 'ball' ? { after: 'cut', plus_s: 4 } : 'end',
    limit: measure === 'climb-rate' ? { min: 0, unit: spec.unit } : { max: 5, unit: spec.unit },
    ...(measure === 'expression' ? { expression: 'abs(bank) + since(cut) * 1 deg/s' } : {}),
    ...(measure === 'speed-regained' ? { value: 200, unit: 'kt' } : {}),
  })) satisfies ScenarioDocument['criteria'];
  return runOf({
    duration_s: 9,
    seed: 11,
    runway: { threshold_m: 4000 },
    air: { windFrom_deg: 40, wind_kt: 12, profile: 'power-law', turbulence: 'moderate' },
    automation: { pitch: { mode: 'hold-speed', target_kt: 100 } },
    events: [
      {
        id: 'cut',
        lane: 'engines',
        kind: 'engine-failure',
        engine: 'left',
        propeller: 'feathered',
        at: { time_s: 1.5 },
        vary: { time_s: [1, 2] },
      },
      {
        id: 'push',
        lane: 'controls',
        kind: 'input',
        axis: 'pedal',
        shape: 'doublet',
        amplitude: 0.7,
        duration_s: 1,
        at: { after: 'cut', delay_s: 1 },
      },
      {
        id: 'gust',
        lane: 'air',
        kind: 'gust',
        axis: 'lateral',
        from: 'right',
        peak_kt: 15,
        shape: 'one-minus-cosine',
        gradientDistance_m: 80,
        at: { when: 'since(push) > 0.5 s' },
      },
      {
        id: 'lever',
        lane: 'engines',
        kind: 'lever',
        engine: 'right',
        position: 0.5,
        over_s: 2,
        at: { after: 'gust', delay_s: 0.5 },
      },
      { id: 'flaps', lane: 'systems', kind: 'configuration', name: 'approach', at: { time_s: 4 } },
      { id: 'say', lane: 'notes', kind: 'message', text: 'Speed', at: { time_s: 5 } },
      { id: 'blind', lane: 'systems', kind: 'display', indication: 'horizon', state: 'frozen', at: { time_s: 6 } },
    ],
    criteria,
  });
}

/** Everything that can be seen of a run. */
function seen(run: Run): object {
  return {
    tick: run.tick,
    hash: run.stateHash(),
    ended: run.ended,
    fired: [...run.fired],
    now: { ...run.now },
    criteria: run.criteria(),
    results: run.results(),
    warnings: run.warnings,
    messages: [...run.messages],
    display: { ...run.display },
    dead: run.deadSide,
  };
}

const input = (sample: { pedal: number; stick: number }, tick: number): void => {
  sample.pedal = tick > 300 ? 9000 : 0;
  sample.stick = (tick % 120) * 60;
};

describe('a snapshot', () => {
  it.each([0, 1, 130, 260, 420, 700])('at tick %i restores the run bit for bit', (tick) => {
    const straight = fly(busyRun(), Infinity, input);
    const run = fly(busyRun(), tick, input);
    const snapshot = run.save();
    const before = seen(run);
    expect([snapshot.tick, snapshot.stateHash]).toEqual([tick, run.stateHash()]);
    fly(run, Infinity, (sample, at) => {
      sample.pedal = -20000 + at;
    });
    run.restore(snapshot);
    expect(seen(run)).toEqual(before);
    fly(run, Infinity, input);
    expect(seen(run)).toEqual(seen(straight));
  });

  it('can be taken up again as often as wanted, also after the end', () => {
    const run = busyRun();
    const start = run.save();
    const first = seen(fly(run, Infinity, input));
    const end = run.save();
    for (let i = 0; i < 2; i++) {
      run.restore(start);
      expect(run.ended).toBeNull();
      expect(seen(fly(run, Infinity, input))).toEqual(first);
    }
    run.restore(start);
    run.restore(end);
    expect(seen(run)).toEqual(first);
  });

  it('forgets events that were injected after it', () => {
    const run = busyRun();
    const snapshot = run.save();
    const event = { id: 'extra', lane: 'notes', kind: 'marker', text: 'x', at: { time_s: 0 } } as const;
    run.inject(event);
    fly(run, 10);
    expect(run.fired.map(({ id }) => id)).toEqual(['extra']);
    run.restore(snapshot);
    fly(run, 10);
    expect(run.fired).toEqual([]);
    run.inject(event);
  });

  it('of a run with other criteria is refused', () => {
    expect(() => busyRun().restore(runOf({}).save())).toThrow(/another run/u);
  });
});
