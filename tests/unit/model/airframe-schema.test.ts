import { describe, expect, it } from 'vitest';
import { parseAirframe } from '#shared/model/airframe-schema.ts';
import type { FieldIssue } from '#shared/model/field-issue.ts';
import { airframeDocument, AIRFRAMES } from './support/plants.ts';

/** The light twin's document with the member at a JSON Pointer set, or removed when the value is undefined. */
function changed(pointer: string, value: unknown): Record<string, unknown> {
  const document = airframeDocument('light-twin');
  const path = pointer.split('/').slice(1);
  const last = path.pop() ?? '';
  let at: object = document;
  for (const key of path) at = Reflect.get(at, key);
  if (value === undefined) Reflect.deleteProperty(at, last);
  else Reflect.set(at, last, value);
  return document;
}

function refusals(document: unknown): FieldIssue[] {
  const parsed = parseAirframe(document);
  expect(parsed.ok).toBe(false);
  return parsed.ok ? [] : parsed.issues;
}

describe('airframe format', () => {
  it.each(AIRFRAMES)('reads the shipped %s without a warning', (slug) => {
    const parsed = parseAirframe(airframeDocument(slug));
    expect(parsed).toMatchObject({ ok: true, warnings: [] });
  });

  it('reads its own output unchanged', () => {
    const first = parseAirframe(airframeDocument('twin-jet'));
    if (!first.ok) throw new Error('refused');
    expect(parseAirframe(first.airframe)).toEqual({ ok: true, airframe: first.airframe, warnings: [] });
  });

  it.each([
    ['/mass/mass_kg', NaN, 'finite'],
    ['/mass/Ixx_kgm2', Infinity, 'finite'],
    ['/mass/mass_kg', 0, 'positive'],
    ['/geometry/wingSpan_m', -1, 'positive'],
    ['/mass/mass_kg', '1750', 'type'],
    ['/name', undefined, 'required'],
    ['/controls/lag_s', undefined, 'required'],
    ['/configurations/0/derivatives/1/Cn_beta', undefined, 'required'],
    ['/class', 'V', 'one-of'],
    ['/format', 'sidewash.airframe/2', 'one-of'],
    ['/engines/0/rotation', 'left', 'one-of'],
    ['/engines/0/power_W', undefined, 'required'],
    ['/colour', 'red', 'unknown-member'],
    ['/engines/1/colour', 'red', 'unknown-member'],
    ['/configurations', [], 'minimum'],
    ['/engines/1/name', 'left', 'unique'],
    ['/configurations/1/name', 'take-off', 'unique'],
    ['/configurations/0/derivatives/1/CL', 0.45, 'unique'],
    ['/mass/Ixz_kgm2', 4900, 'inertia'],
    ['/controls/pedalForce/at_kt', undefined, 'required'],
    ['/controls/rudderMax_deg', 95, 'maximum'],
  ])('refuses %s = %s by the rule "%s", naming field and remedy', (pointer, value, rule) => {
    const [issue, ...more] = refusals(changed(pointer, value));
    expect(more).toEqual([]);
    expect(issue).toMatchObject({ field: pointer, rule });
    expect(issue.message.length).toBeGreaterThan(10);
    expect(issue.remedy).toMatch(/\.$/);
  });

  it('refuses an aspect ratio outside 1 to 40', () => {
    expect(refusals(changed('/geometry/wingSpan_m', 4))).toMatchObject([
      { field: '/geometry/wingSpan_m', rule: 'aspect-ratio' },
    ]);
    expect(refusals(changed('/geometry/wingArea_m2', 3))).toMatchObject([{ rule: 'aspect-ratio' }]);
  });

  it('refuses a ninth engine and takes eight', () => {
    const [engine] = airframeDocument('light-twin').engines as object[];
    const engines = (n: number): object[] => Array.from({ length: n }, (_, i) => ({ ...engine, name: `engine ${i}` }));
    expect(parseAirframe(changed('/engines', engines(8))).ok).toBe(true);
    expect(refusals(changed('/engines', engines(9)))).toMatchObject([{ field: '/engines', rule: 'engine-count' }]);
  });

  it('refuses a ratio changer without the numbers of its law', () => {
    expect(refusals(changed('/controls/rudderRatio', { law: 'inverse' }))).toMatchObject([
      { field: '/controls/rudderRatio/fullUpTo_kt', rule: 'required' },
    ]);
    const falling = { law: 'table', table: [[100, 1], [90, 0.5]] }; // prettier-ignore
    expect(refusals(changed('/controls/rudderRatio', falling))).toMatchObject([{ rule: 'ascending' }]);
  });

  it('refuses body-axis inertias without an angle of attack on each row', () => {
    const issues = refusals(changed('/mass/axes', 'body'));
    expect(issues.every(({ rule, field }) => rule === 'required' && field.endsWith('/alpha_deg'))).toBe(true);
    expect(issues).toHaveLength(5);
  });

  it('refuses a loading whose inertias no body has', () => {
    const loadings = [{ name: 'aft', mass_kg: 1700, cgAft_m: 0.1, Ixx_kgm2: 1 }];
    expect(refusals(changed('/loadings', loadings))).toMatchObject([{ field: '/loadings/0', rule: 'inertia' }]);
  });

  it.each([
    ['/mass/Iyy_kgm2', undefined, '/mass/Iyy_kgm2', 'default'],
    ['/mass/Izz_kgm2', 9000, '/mass/Izz_kgm2', 'inertia-sum'],
    ['/configurations/0/derivatives/0/Cl_p', 0, '/configurations/0/derivatives/0/Cl_p', 'roll-damping'],
    ['/configurations/1/derivatives/1/Cn_beta', -0.01, '/configurations/1/derivatives/1/Cn_beta', 'weathercock'],
    ['/configurations/0/CD0', undefined, '/configurations/0/CD0', 'default'],
    ['/sources', [{ field: '/mass/weight', text: 'scale' }], '/sources/0/field', 'json-pointer'],
  ])('warns of %s = %s', (pointer, value, field, rule) => {
    const parsed = parseAirframe(changed(pointer, value));
    expect(parsed.ok && parsed.warnings).toMatchObject([{ field, rule }]);
  });

  it('fills the defaults of the format', () => {
    const document = changed('/configurations/0/kInduced', undefined);
    document.engines = [{ name: 'only', kind: 'jet', y_m: 0, staticThrust_N: 1000 }];
    const parsed = parseAirframe(document);
    if (!parsed.ok) throw new Error('refused');
    expect(parsed.airframe.configurations[0].kInduced).toBe(0.05);
    expect(parsed.airframe.engines[0]).toMatchObject({
      efficiency: 0.8,
      spoolDown_s: 0.5,
      spoolUp_s: 1,
      featherTime_s: 5,
      rotation: 'clockwise',
      windmillDragArea_m2: 0,
    });
  });

  it.each([null, 7, [], 'text', undefined])('refuses %s without throwing', (value) => {
    expect(refusals(value).length).toBeGreaterThan(0);
  });
});
