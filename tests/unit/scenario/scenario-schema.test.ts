import { describe, expect, it } from 'vitest';
import { checkAgainstAirframe, parseScenario } from '#shared/scenario/scenario-schema.ts';
import type { ScenarioDocument } from '#shared/scenario/scenario-schema.ts';
import { airframeOf, cutLeft, documentOf, jsonOf, scenarioOf } from './support/build-scenario.ts';

const bank = { id: 'bank', title: 'Bank', measure: 'bank', limit: { max: 20, unit: 'deg' } } as const;
const marker = (id: string, at: object): object => ({ id, lane: 'notes', kind: 'marker', text: 'x', at });

/** Field and rule of every issue of a changed document. */
function refusals(over: object): string[] {
  const parsed = parseScenario({ ...documentOf(), ...over });
  return parsed.ok ? [] : parsed.issues.map(({ field, rule }) => `${field} ${rule}`);
}
const withEvents = (...events: object[]): string[] => refusals({ events });
const withCriteria = (...criteria: object[]): string[] => refusals({ events: [cutLeft], criteria });

describe('a scenario file', () => {
  it('takes the example of the design page as it stands', () => {
    const example = {
      format: 'sidewash.scenario/1',
      title: 'Left engine cut in the climb',
      summary: '…',
      purpose: '…',
      talkingPoint: '…',
      airframe: { slug: 'light-twin', revision: 1 },
      configuration: 'take-off',
      loading: null,
      fidelity: 'large-angle',
      technique: 'zero-sideslip',
      start: { ias_kt: 88, height_ft: 300, heading_deg: 90, path_deg: 2, levers: [1, 1] },
      runway: { heading_deg: 90, elevation_ft: 0, width_m: 30, threshold_m: 900, glidepath_deg: 3, gearHeight_m: 1.5 },
      air: { windFrom_deg: 120, wind_kt: 8, profile: 'none', turbulence: 'none' },
      reference: { task: 'hold-heading' },
      automation: { pitch: { mode: 'hold-path', path_deg: 2 }, yawDamper: false, rudderRatio: true },
      allow: { freeze: false, slow: false, rewind: false, arrows: true },
      seed: 7,
      duration_s: 30,
      events: [
        {
          id: 'cut',
          lane: 'engines',
          at: { time_s: 3 },
          kind: 'engine-failure',
          engine: 'left',
          vary: { time_s: [2.5, 4] },
        },
        {
          id: 'gust',
          lane: 'air',
          at: { after: 'cut', delay_s: 4 },
          kind: 'gust',
          axis: 'lateral',
          shape: 'one-minus-cosine',
          from: 'right',
          peak_kt: 15,
          gradientDistance_m: 60,
        },
        {
          id: 'low',
          lane: 'notes',
          at: { when: 'ias < vmc + 25 kt and since(cut) > 2 s' },
          kind: 'message',
          text: 'Speed',
          duration_s: 3,
        },
      ],
      criteria: [
        {
          id: 'hdg',
          title: 'Heading within 20°',
          measure: 'heading-deviation',
          from: 'cut',
          to: 'end',
          limit: { max: 20, unit: 'deg' },
          required: true,
        },
        {
          id: 'react',
          title: 'Correct pedal within 2 s',
          measure: 'first-correct-pedal',
          from: 'cut',
          limit: { max: 2, unit: 's' },
          required: true,
        },
      ],
    };
    const parsed = parseScenario(example);
    expect(parsed.ok && parsed.warnings).toEqual([]);
    if (!parsed.ok) return;
    expect(checkAgainstAirframe(parsed.scenario, airframeOf('light-twin')).issues).toEqual([]);
    expect(parsed.document).toBe(example);
  });

  it('fills in the defaults of the format', () => {
    const scenario = scenarioOf({ start: { ias_kt: 90, height_ft: 500 } });
    expect(scenario).toMatchObject({
      fidelity: 'large-angle',
      technique: 'zero-sideslip',
      seed: 1,
      runway: null,
      configuration: null,
      start: { heading_deg: 360, path_deg: 0 },
      reference: { task: 'hold-heading' },
      air: { wind_kt: 0, profile: 'none', turbulence: 'none' },
      allow: { freeze: false, slow: false, rewind: false, arrows: true },
    });
    const again = parseScenario(scenario);
    expect(again.ok && again.scenario).toEqual(scenario);
    expect(scenarioOf({ reference: { task: 'hold-track' } }).reference).toEqual({ task: 'hold-track', decrab_ft: 20 });
  });

  it('of another version, or that is something else, is refused in one clear issue', () => {
    expect(refusals({ format: 'sidewash.scenario/2', more: 1 })).toEqual(['/format format-version']);
    expect(refusals({ format: 'sidewash.airframe/1' })).toEqual(['/format format']);
    expect(parseScenario(null).ok).toBe(false);
    expect(parseScenario([]).ok).toBe(false);
    expect(parseScenario('{}').ok).toBe(false);
  });

  it('names unknown and missing members', () => {
    expect(refusals({ colour: 'red' })).toEqual(['/colour unknown-member']);
    expect(refusals({ start: { ias_kt: 90, height_ft: 500, flaps: 1 } })).toEqual(['/start/flaps unknown-member']);
    expect(withEvents({ ...cutLeft, size: 3 })).toEqual(['/events/0/size unknown-member']);
    expect(refusals({ duration_s: undefined })).toEqual(['/duration_s required']);
    expect(refusals({ start: { height_ft: 500 } })).toEqual(['/start/ias_kt required']);
  });

  it('refuses numbers out of range and starts below the ground', () => {
    expect(refusals({ start: { ias_kt: -90, height_ft: 500 } })).toEqual(['/start/ias_kt positive']);
    expect(refusals({ start: { ias_kt: 90, height_ft: 0 } })).toEqual(['/start/height_ft above-ground']);
    expect(
      refusals({ start: { ias_kt: 90, height_ft: 1000 }, runway: { elevation_ft: 1000, threshold_m: 100 } }),
    ).toEqual(['/start/height_ft above-ground']);
    expect(refusals({ duration_s: 0 })).toHaveLength(1);
    expect(refusals({ seed: 1.5 })).toHaveLength(1);
    expect(withEvents(marker('a', { time_s: -1 }))).toEqual(['/events/0/at/time_s minimum']);
    expect(withEvents(cutLeft, marker('a', { after: 'cut', delay_s: -2 }))).toEqual(['/events/1/at/delay_s minimum']);
  });

  it('refuses ten thousand events at once', () => {
    const events = Array.from({ length: 10_000 }, (_, i) => marker(`e${i}`, { time_s: 1 }));
    expect(refusals({ events })).toEqual(['/events maximum']);
    expect(refusals({ events: events.slice(0, 500) })).toEqual([]);
  });
});

describe('an event', () => {
  it('must be of a known kind, in its lane, with one trigger', () => {
    expect(withEvents({ ...cutLeft, kind: 'explosion' })).toEqual(['/events/0/kind one-of']);
    expect(withEvents({ ...cutLeft, lane: 'air' })).toEqual(['/events/0/lane lane']);
    expect(withEvents({ ...cutLeft, at: {} })).toEqual(['/events/0/at trigger']);
    expect(withEvents({ ...cutLeft, at: { time_s: 1, when: 't > 1 s' } })).toEqual(['/events/0/at trigger']);
  });

  it('needs an id of its own', () => {
    expect(withEvents(cutLeft, cutLeft)).toEqual(['/events/1/id unique']);
    expect(withEvents({ ...cutLeft, id: 'end' })).toEqual(['/events/0/id reserved']);
  });

  it('may not hang on what is not there, on itself, or in a circle', () => {
    expect(withEvents(marker('a', { after: 'b' }))).toEqual(['/events/0/at/after known-event']);
    expect(withEvents(marker('a', { when: 'since(b) > 1 s' }))).toEqual(['/events/0/at/when known-event']);
    expect(withEvents(marker('a', { after: 'a' }))).toEqual(['/events/0/at cycle']);
    expect(withEvents(marker('a', { after: 'b' }), marker('b', { after: 'a' }))).toEqual(['/events/1/at cycle']);
    expect(
      withEvents(marker('a', { when: 'since(b) > 1 s' }), marker('b', { after: 'c' }), marker('c', { after: 'a' })),
    ).toEqual(['/events/2/at cycle']);
    expect(withEvents(marker('a', { after: 'b' }), marker('b', { time_s: 1 }))).toEqual([]);
  });

  it('tells the place in an expression', () => {
    const parsed = parseScenario(
      documentOf({ events: [marker('a', { when: 'ias < 80 knots' }) as ScenarioDocument['events'][number]] }),
    );
    expect(parsed.ok).toBe(false);
    if (parsed.ok) return;
    expect(parsed.issues[0]).toMatchObject({ field: '/events/0/at/when', rule: 'expression' });
    expect(parsed.issues[0].message).toContain('at character 10:');
  });

  it('varies its own numbers only, inside what they allow', () => {
    const vary = (range: object, event: object = cutLeft): string[] => withEvents({ ...event, vary: range });
    expect(vary({ time_s: [1, 2] })).toEqual([]);
    expect(vary({ time_s: [2, 1] })).toEqual(['/events/0/vary/time_s ascending']);
    expect(vary({ time_s: [-1, 2] })).toEqual(['/events/0/vary/time_s range']);
    expect(vary({ delay_s: [1, 2] })).toEqual(['/events/0/vary/delay_s variable-member']);
    expect(vary({ engine: [1, 2] })).toEqual(['/events/0/vary/engine variable-member']);
    expect(vary({ fraction: [0, 2] }, { ...cutLeft, kind: 'engine-partial', fraction: 0.5 })).toEqual([
      '/events/0/vary/fraction range',
    ]);
  });

  it('has the members its shape needs', () => {
    const gust = { id: 'g', lane: 'air', kind: 'gust', axis: 'lateral', from: 'left', peak_kt: 10, at: { time_s: 1 } };
    expect(withEvents({ ...gust, shape: 'step' })).toEqual([]);
    expect(withEvents({ ...gust, shape: 'ramp', over_s: 1 })).toEqual([]);
    expect(withEvents({ ...gust, shape: 'ramp' })).toEqual(['/events/0/over_s required']);
    expect(withEvents({ ...gust, shape: 'one-minus-cosine' })).toEqual(['/events/0/gradientDistance_m required']);
    expect(withEvents({ ...gust, shape: 'ramp', over_s: 1, gradientDistance_m: 30 })).toEqual([
      '/events/0/over_s one-of',
    ]);
    expect(withEvents({ ...gust, axis: 'yaw-rate', shape: 'step' })).not.toEqual([]);
    const input = { id: 'i', lane: 'controls', kind: 'input', axis: 'pedal', amplitude: 0.5, at: { time_s: 1 } };
    expect(withEvents({ ...input, shape: 'doublet' })).toEqual(['/events/0/duration_s required']);
    expect(withEvents({ ...input, shape: 'step' })).toEqual([]);
    expect(withEvents({ ...input, shape: 'step', amplitude: 1.5 })).toEqual(['/events/0/amplitude maximum']);
    expect(
      withEvents({
        id: 'w',
        lane: 'air',
        kind: 'wind-change',
        windFrom_deg: 10,
        wind_kt: 5,
        over_s: 0.5,
        at: { time_s: 1 },
      }),
    ).toEqual(['/events/0/over_s minimum']);
    expect(withEvents({ id: 'p', lane: 'systems', kind: 'pitch-mode', mode: 'glidepath', at: { time_s: 1 } })).toEqual([
      '/events/0/mode needs-runway',
    ]);
  });
});

describe('a criterion', () => {
  it('has a limit with a fitting unit', () => {
    expect(withCriteria(bank)).toEqual([]);
    expect(withCriteria({ ...bank, limit: { max: 20, unit: 'kt' } })).toEqual(['/criteria/0/limit/unit unit']);
    expect(withCriteria({ ...bank, limit: { max: 20, unit: 'rad' } })).toEqual(['/criteria/0/limit/unit unit']);
    expect(withCriteria({ ...bank, limit: { unit: 'deg' } })).toEqual(['/criteria/0/limit limit']);
    expect(withCriteria({ ...bank, limit: { max: 1, min: 0, unit: 'deg' } })).toEqual(['/criteria/0/limit limit']);
    expect(withCriteria({ ...bank, limit: { within: [3, 1], unit: 'deg' } })).toEqual([
      '/criteria/0/limit/within ascending',
    ]);
    expect(withCriteria({ ...bank, measure: 'bank-angle' })).toEqual(['/criteria/0/measure one-of']);
  });

  it('opens and closes at events that exist, in that order', () => {
    expect(withCriteria({ ...bank, from: 'cut', to: 'end' })).toEqual([]);
    expect(withCriteria({ ...bank, from: { after: 'cut', plus_s: 2 }, to: { after: 'cut', plus_s: 5 } })).toEqual([]);
    expect(withCriteria({ ...bank, from: 'gust' })).toEqual(['/criteria/0/from known-event']);
    expect(withCriteria({ ...bank, to: { after: 'gust', plus_s: 1 } })).toEqual(['/criteria/0/to/after known-event']);
    expect(withCriteria({ ...bank, from: { after: 'cut', plus_s: -1 } })).toEqual(['/criteria/0/from/plus_s minimum']);
    expect(withCriteria({ ...bank, from: { after: 'cut', plus_s: 5 }, to: { after: 'cut', plus_s: 2 } })).toEqual([
      '/criteria/0/to window',
    ]);
    expect(withCriteria({ ...bank, from: { after: 'cut', plus_s: 1 }, to: 'cut' })).toEqual(['/criteria/0/to window']);
    expect(withCriteria({ ...bank, from: 'end', to: 'cut' })).toEqual(['/criteria/0/to window']);
    expect(withCriteria({ ...bank, from: 'cut', to: 'start' })).toEqual(['/criteria/0/to window']);
  });

  it('may close at an event that waits for another one, but not before its own start', () => {
    const events = [marker('low', { when: 'ias < 80 kt' }), marker('later', { after: 'low', delay_s: 3 })];
    const window = (from: unknown, to: unknown): string[] => refusals({ events, criteria: [{ ...bank, from, to }] });
    expect(window('low', 'later')).toEqual([]);
    expect(window('later', 'low')).toEqual(['/criteria/0/to window']);
    expect(window('later', { after: 'low', plus_s: 4 })).toEqual([]);
    expect(window({ after: 'start', plus_s: 2 }, 'low')).toEqual([]);
  });

  it('takes members of other measures for a mistake', () => {
    expect(withCriteria({ ...bank, expression: 'abs(bank)' })).toEqual(['/criteria/0/expression unused']);
    expect(withCriteria({ ...bank, value: 80, unit: 'kt' })).toEqual([
      '/criteria/0/value unused',
      '/criteria/0/unit unused',
    ]);
    const regained = { id: 's', title: 'S', measure: 'speed-regained', limit: { max: 5, unit: 's' } };
    expect(withCriteria({ ...regained, value: 80, unit: 'kt' })).toEqual([]);
    expect(withCriteria(regained)).toEqual(['/criteria/0/value required', '/criteria/0/unit required']);
    expect(withCriteria({ ...regained, value: 80, unit: 'deg' })).toEqual(['/criteria/0/unit unit']);
    const expression = { id: 'e', title: 'E', measure: 'expression', limit: { max: 5, unit: 'deg' } };
    expect(withCriteria({ ...expression, expression: 'abs(bank) + abs(sideslip)' })).toEqual([]);
    expect(withCriteria(expression)).toEqual(['/criteria/0/expression required']);
    expect(withCriteria({ ...expression, expression: 'ias' })).toEqual(['/criteria/0/limit/unit unit']);
    expect(withCriteria({ ...expression, expression: 'since(gust) / 1 s' })).toContain(
      '/criteria/0/expression known-event',
    );
  });

  it('never rewards pedal reversals', () => {
    const reversals = { id: 'r', title: 'R', measure: 'pedal-reversals' };
    expect(withCriteria({ ...reversals, limit: { max: 0, unit: 'count' } })).toEqual([]);
    expect(withCriteria({ ...reversals, limit: { min: 2, unit: 'count' } })).toEqual([
      '/criteria/0/limit lower-is-better',
    ]);
    expect(withCriteria({ ...reversals, limit: { within: [1, 3], unit: 'count' } })).toEqual([
      '/criteria/0/limit lower-is-better',
    ]);
  });
});

describe('a scenario on an airframe', () => {
  const against = (over: Partial<ScenarioDocument>, slug = 'light-twin'): { issues: string[]; warnings: string[] } => {
    const { issues, warnings } = checkAgainstAirframe(scenarioOf(over), airframeOf(slug));
    return { issues: issues.map(({ field, rule }) => `${field} ${rule}`), warnings: warnings.map(({ rule }) => rule) };
  };
  it('needs the engines, levers, configurations and loadings it names', () => {
    expect(against({ events: [{ ...cutLeft, engine: 'middle' }] }).issues).toEqual(['/events/0/engine known-engine']);
    expect(against({ start: { ias_kt: 90, height_ft: 500, levers: [1] } }).issues).toEqual([
      '/start/levers engine-count',
    ]);
    expect(against({ configuration: 'cruise' }).issues).toEqual(['/configuration known-configuration']);
    expect(against({ loading: 'ferry' }).issues).toEqual(['/loading known-loading']);
    expect(against({ events: [cutLeft] }).issues).toEqual([]);
  });
  it('warns of events without effect', () => {
    const damper = { id: 'd', lane: 'systems', kind: 'yaw-damper', on: false, at: { time_s: 1 } } as const;
    expect(against({ events: [damper] }).warnings).toEqual(['no-yaw-damper']);
    expect(against({ events: [damper], start: { ias_kt: 200, height_ft: 5000 } }, 'twin-jet').warnings).toEqual([]);
    const feather = { id: 'f', lane: 'engines', kind: 'feather', engine: 'left', at: { time_s: 1 } } as const;
    expect(against({ events: [feather], start: { ias_kt: 200, height_ft: 5000 } }, 'twin-jet').warnings).toEqual([
      'jet-feather',
    ]);
  });
});

it('every shipped scenario parses, fits its airframe, and survives export and import unchanged', async () => {
  const { readdirSync } = await import('node:fs');
  const files = readdirSync(new URL('../../../scenarios/', import.meta.url)).filter((name) => name.endsWith('.json'));
  expect(files.length).toBeGreaterThanOrEqual(6);
  for (const file of files) {
    const content = jsonOf(`scenarios/${file}`);
    const parsed = parseScenario(content);
    expect(parsed.ok ? parsed.warnings : parsed.issues, file).toEqual([]);
    if (!parsed.ok) continue;
    expect(checkAgainstAirframe(parsed.scenario, airframeOf(parsed.scenario.airframe.slug)).issues, file).toEqual([]);
    expect(JSON.parse(JSON.stringify(parsed.document)), file).toEqual(content);
  }
});
