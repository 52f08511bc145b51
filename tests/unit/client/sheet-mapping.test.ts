/** A foreign sheet becomes an airframe: labels found, units and axes converted, and the published modes come out. */
import { describe, expect, it } from 'vitest';
import { lateralModes } from '#shared/analysis/modes.ts';
import { parseAirframe } from '#shared/model/airframe-schema.ts';
import { prepareAircraft } from '#shared/model/aircraft.ts';
import { buildSmallDisturbance } from '#shared/model/small-disturbance.ts';
import { plainLabel } from '../../../src/features/airframe-import/sheet-labels.ts';
import {
  type Cell,
  type SheetMeaning,
  guessMapping,
  mapSheet,
  parseNumber,
} from '../../../src/features/airframe-import/sheet-mapping.ts';

/**
 * DC-8 in power approach, condition 1: D. K. Schmidt, Introduction to Aircraft Flight Dynamics, AIAA 1998, appendix B.4
 * (G. L. Teper, NASA CR-96008, 1969). Primed dimensional derivatives, US units, stability axes; sea level.
 */
export const DC8: readonly (readonly Cell[])[] = [
  ['Quantity', 'Value', 'Unit'],
  ['W', 190000, 'lb'],
  ['S', 2600, 'ft2'],
  ['b', 142.3, 'ft'],
  ['c', 23, 'ft'],
  ['V', 243, 'ft/s'],
  ['rho', 0.002384, 'slug/ft3'],
  ['Ix', 3090000, 'slug ft2'],
  ['Iz', 5580000, 'slug ft2'],
  ['Ixz', 28000, 'slug ft2'],
  ['Yβ', -27.05, 'ft/s2'],
  ['Yδr', 5.782, 'ft/s2'],
  ["L'β", -1.327, '1/s2'],
  ["L'p", -0.95, '1/s'],
  ["L'r", 0.609, '1/s'],
  ["L'δa", 0.726, '1/s2'],
  ["L'δr", 0.181, '1/s2'],
  ["N'β", 0.756, '1/s2'],
  ["N'p", -0.124, '1/s'],
  ["N'r", -0.264, '1/s'],
  ["N'δa", 0.053, '1/s2'],
  ["N'δr", -0.388, '1/s2'],
];
const MEANING: SheetMeaning = {
  units: 'US',
  axes: 'stability',
  inertiaAxes: 'stability',
  form: 'dimensional-primed',
  aileron: 'right',
  rudder: 'left',
  angles: 'rad',
  rates: 'b/2V',
  name: 'DC-8, condition 1',
  airplaneClass: 'III',
  configuration: 'approach',
  CLmax: 2.2,
  aileronMaxDeg: 20,
  rudderMaxDeg: 30,
  source: 'Schmidt, AIAA 1998, appendix B.4',
};

describe('a foreign sheet', () => {
  it('has its labels found whatever their writing', () => {
    expect(plainLabel('C_l,β (1/rad)')).toBe('Clbeta');
    const { labelColumn, valueColumn, rows } = guessMapping(DC8);
    expect([labelColumn, valueColumn]).toEqual([0, 1]);
    expect(rows).toMatchObject({ mass: 1, wingSpan: 3, speed: 5, Ixz: 9, CY_beta: 10, Cl_beta: 12, Cn_dr: 21 });
    expect(rows.CY_p).toBeUndefined();
  });

  it('of the DC-8 gives the published modes', () => {
    const mapped = mapSheet(DC8, guessMapping(DC8), MEANING);
    if (!mapped.ok) throw new Error(JSON.stringify(mapped.problems));
    const parsed = parseAirframe(mapped.document);
    if (!parsed.ok) throw new Error(JSON.stringify(parsed.issues));
    const aircraft = prepareAircraft(parsed.airframe, { configuration: 'approach' });
    const modes = lateralModes(buildSmallDisturbance(aircraft, { tasMps: 243 * 0.3048, heightM: 0 }).A).modes;
    const dutch = modes.find(({ kind }) => kind === 'dutch-roll');
    // Published denominator: (s − 0.013)(s + 1.121)(s² + 0.22 s + 0.99); tolerance 2 % of the frequency.
    expect(dutch?.wn).toBeCloseTo(0.9956, 1);
    expect(dutch?.zeta).toBeCloseTo(0.109, 2);
    expect(modes.find(({ kind }) => kind === 'roll')?.re).toBeCloseTo(-1.121, 1);
  });

  it('says beside the row what cannot be read', () => {
    const broken = DC8.map((row) => (row[0] === 'S' ? ['S', 'twenty', 'ft2'] : row));
    const mapping = guessMapping(DC8);
    const mapped = mapSheet(broken, mapping, MEANING);
    expect(mapped).toMatchObject({ ok: false, problems: [{ quantity: 'wingArea', row: 3 }] });
    const { wingSpan: _gone, ...rest } = mapping.rows;
    expect(mapSheet(DC8, { ...mapping, rows: rest }, MEANING)).toMatchObject({
      ok: false,
      problems: [{ quantity: 'wingSpan', row: null }],
    });
    expect(mapSheet(DC8, mapping, { ...MEANING, axes: 'body' })).toMatchObject({ ok: false });
  });

  it.each([
    ['0,163', true, 0.163],
    ['1,234.5', true, 1234.5],
    ['1,234', false, 0],
    ['=2+3', false, 0],
    ['−0.5', true, -0.5],
    ['', false, 0],
    ['3 090 000', true, 3090000],
  ])('cell %s is read or refused', (cell, ok, value) => {
    const parsed = parseNumber(cell);
    expect(parsed.ok).toBe(ok);
    if (parsed.ok) expect(parsed.value).toBe(value);
  });
});
