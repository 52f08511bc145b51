import { describe, expect, it } from 'vitest';
import { instantOf, WallTimeRefusal, wallTime } from '../../../server/services/assignments/wall-time.ts';

// Clock changes of the time-zone database: Europe/Oslo forward on 29 March 2026 at 01:00 UTC, back on 25 October 2026 at
// 01:00 UTC; America/St_Johns (UTC−3:30, summer −2:30) forward on 8 March 2026; Australia/Lord_Howe changes by half an hour.
describe('the instant of a wall time', () => {
  it('follows the clock of its zone through the year', () => {
    expect(instantOf('2026-06-05T17:00', 'Europe/Oslo')).toEqual({ at: new Date('2026-06-05T15:00Z'), twice: false });
    expect(instantOf('2026-01-05T17:00', 'Europe/Oslo').at).toEqual(new Date('2026-01-05T16:00Z'));
    expect(instantOf('2026-03-07T12:00', 'America/St_Johns').at).toEqual(new Date('2026-03-07T15:30Z'));
    expect(instantOf('2026-03-08T12:00', 'America/St_Johns').at).toEqual(new Date('2026-03-08T14:30Z'));
    expect(instantOf('2026-12-31T23:59', 'Pacific/Kiritimati').at).toEqual(new Date('2026-12-31T09:59Z'));
    expect(instantOf('2026-03-01T00:00', 'UTC').at).toEqual(new Date('2026-03-01T00:00Z'));
  });

  it('is the second one of an hour that comes twice, and says so', () => {
    expect(instantOf('2026-10-25T02:30', 'Europe/Oslo')).toEqual({ at: new Date('2026-10-25T01:30Z'), twice: true });
    expect(instantOf('2026-10-25T01:59', 'Europe/Oslo')).toEqual({ at: new Date('2026-10-24T23:59Z'), twice: false });
    expect(instantOf('2026-10-25T03:00', 'Europe/Oslo')).toEqual({ at: new Date('2026-10-25T02:00Z'), twice: false });
    expect(instantOf('2026-04-05T01:45', 'Australia/Lord_Howe').twice).toBe(true);
  });

  it('is refused where clocks skip it, for a day that no month has and an unknown zone', () => {
    const ruleOf = (wall: string, zone: string): string => {
      try {
        instantOf(wall, zone);
      } catch (error) {
        if (error instanceof WallTimeRefusal) return error.rule;
        throw error;
      }
      return 'none';
    };
    expect(ruleOf('2026-03-29T02:30', 'Europe/Oslo')).toBe('clock-change');
    expect(ruleOf('2026-03-29T03:00', 'Europe/Oslo')).toBe('none');
    expect(ruleOf('2026-02-29T12:00', 'UTC')).toBe('date');
    expect(ruleOf('2026-06-05T25:00', 'UTC')).toBe('date');
    expect(ruleOf('2026-06-05T12:00', 'Mars/Olympus')).toBe('zone');
  });

  it('comes back as the wall time it was, every quarter of an hour of a year', () => {
    for (const zone of ['Europe/Oslo', 'America/St_Johns', 'Australia/Lord_Howe', 'Asia/Kathmandu']) {
      for (let t = Date.UTC(2026, 0, 1); t < Date.UTC(2027, 0, 1); t += 15 * 60_000 * 7) {
        const wall = wallTime(new Date(t), zone);
        const { at, twice } = instantOf(wall, zone);
        if (twice) expect(Math.abs(at.getTime() - t)).toBeLessThanOrEqual(3_600_000);
        else expect(at.getTime(), `${wall} ${zone}`).toBe(t);
      }
    }
  });
});
