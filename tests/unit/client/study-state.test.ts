import { describe, expect, test } from 'vitest';
import { addressOf, asksForStudy, differs, stateToSave } from '../../../src/features/studies/study-state.ts';
import { fromQuery, toQuery } from '../../../src/features/analysis-bench/bench-state.ts';

describe('a study of the Analysis screen', () => {
  const shown = { tab: 'map', shifts: 'Cn_beta:0.02,Cl_beta:-0.01', ias: '95.5', seed: '12', study: 'earlier' };

  test('saves the whole address with the revision pinned, but not which study it came from', () => {
    expect(stateToSave(shown, 'light-twin', 3)).toEqual({
      tab: 'map',
      shifts: 'Cn_beta:0.02,Cl_beta:-0.01',
      ias: '95.5',
      seed: '12',
      airframe: 'light-twin',
      revision: '3',
    });
  });

  test('reopens exactly: the state read from the saved address is saved the same again', () => {
    const saved = stateToSave(toQuery(fromQuery(shown)), 'light-twin', 3);
    const again = stateToSave(toQuery(fromQuery(addressOf('id', saved))), 'light-twin', 3);
    expect(again).toEqual(saved);
    expect(differs(saved, again)).toBe(false);
  });

  test('a moved slider, an added or a dropped member differ', () => {
    const saved = { airframe: 'light-twin', revision: '3', ias: '95' };
    expect(differs(saved, { ...saved, ias: '96' })).toBe(true);
    expect(differs(saved, { ...saved, damper: 'on' })).toBe(true);
    expect(differs(saved, { airframe: 'light-twin', revision: '3' })).toBe(true);
  });

  test('only an address without an airframe asks for the saved state', () => {
    expect(asksForStudy({ study: 'id' })).toBe('id');
    expect(asksForStudy({ study: 'id', airframe: 'light-twin' })).toBe('');
    expect(asksForStudy({})).toBe('');
  });
});
