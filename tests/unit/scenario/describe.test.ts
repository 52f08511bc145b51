import { describe, expect, it } from 'vitest';
import { criterionText, eventText, triggerText } from '#shared/scenario/describe.ts';
import type { ScenarioDocument } from '#shared/scenario/scenario-schema.ts';
import { scenarioOf } from './support/build-scenario.ts';

type Event = NonNullable<ScenarioDocument['events']>[number];
const at = { time_s: 1 };
const textOf = (event: Event): string =>
  eventText(scenarioOf({ events: [event], runway: { threshold_m: 900 } }).events[0]);

describe('an event reads', () => {
  it.each<[Event, string]>([
    [{ id: 'a', lane: 'engines', kind: 'engine-failure', engine: 'left', at }, 'Left engine fails'],
    [
      { id: 'a', lane: 'engines', kind: 'engine-failure', engine: 'right', propeller: 'feathered', at },
      'Right engine fails, propeller feathers',
    ],
    [
      { id: 'a', lane: 'engines', kind: 'engine-partial', engine: 'left', fraction: 0.4, at },
      'Left engine drops to 40 % of its thrust',
    ],
    [{ id: 'a', lane: 'engines', kind: 'lever', engine: 'all', position: 0.5, at }, 'All levers to 50 % over 0.5 s'],
    [
      {
        id: 'a',
        lane: 'air',
        kind: 'gust',
        axis: 'lateral',
        from: 'right',
        peak_kt: 15,
        shape: 'one-minus-cosine',
        gradientDistance_m: 60,
        at,
      },
      'Gust from the right, 15 kt, one-minus-cosine, peak after 60 m',
    ],
    [
      { id: 'a', lane: 'air', kind: 'gust', axis: 'yaw-rate', peak_deg_s: -3, shape: 'ramp', over_s: 2, at },
      'Yawing gust to the left, 3°/s, ramp, peak after 2 s',
    ],
    [
      { id: 'a', lane: 'air', kind: 'wind-change', windFrom_deg: 20, wind_kt: 12, over_s: 3, at },
      'Wind changes to 020°, 12 kt over 3 s',
    ],
    [{ id: 'a', lane: 'controls', kind: 'rudder-jam', at_deg: -5, at }, 'Rudder jams at 5° right'],
    [{ id: 'a', lane: 'controls', kind: 'rudder-hardover', to: 'left', at }, 'Rudder runs hard over to the left'],
    [
      { id: 'a', lane: 'controls', kind: 'input', axis: 'pedal', shape: 'doublet', amplitude: -0.5, duration_s: 1, at },
      'Pedal 50 % left for 1 s, then as much the other way',
    ],
    [{ id: 'a', lane: 'systems', kind: 'yaw-damper', on: false, at }, 'Yaw damper off'],
    [
      { id: 'a', lane: 'systems', kind: 'pitch-mode', mode: 'decelerate', rate_kt_s: 1, at },
      'Pitch: decelerate by 1 kt/s',
    ],
    [{ id: 'a', lane: 'systems', kind: 'pitch-mode', mode: 'manual', at }, 'Pitch: handed to the pilot'],
    [
      { id: 'a', lane: 'systems', kind: 'display', indication: 'horizon', state: 'frozen', at },
      'Horizon indication frozen',
    ],
    [{ id: 'a', lane: 'notes', kind: 'message', text: 'Look out', at }, 'Look out'],
  ])('%o', (event, expected) => {
    expect(textOf(event)).toBe(expected);
  });
});

it('triggers and criteria read as sentences', () => {
  expect(triggerText({ time_s: 2.5 })).toBe('at 2.5 s');
  expect(triggerText({ after: 'cut', delay_s: 4 })).toBe('4 s after cut');
  expect(triggerText({ when: 'ias < 80 kt' })).toBe('when ias < 80 kt');
  const criteria: ScenarioDocument['criteria'] = [
    { id: 'a', title: 'A', measure: 'heading-deviation', limit: { max: 20, unit: 'deg' } },
    {
      id: 'b',
      title: 'B',
      measure: 'climb-rate',
      limit: { min: -100, unit: 'ft/min' },
      from: { after: 'start', plus_s: 3 },
      required: false,
    },
    { id: 'c', title: 'C', measure: 'speed-regained', value: 90, unit: 'kt', limit: { max: 8, unit: 's' } },
    { id: 'd', title: 'D', measure: 'expression', expression: 'abs(bank)', limit: { within: [0, 5], unit: 'deg' } },
  ];
  expect(scenarioOf({ criteria }).criteria.map(criterionText)).toEqual([
    'Heading change at most 20°, from the start to the end.',
    'Climb rate at least −100 ft/min, from 3 s after the start to the end (not required).',
    'Speed above 90 kt again within 8 s, from the start to the end.',
    '“abs(bank)” between 0° and 5°, from the start to the end.',
  ]);
});
