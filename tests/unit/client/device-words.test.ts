import { afterEach, describe, expect, it } from 'vitest';
import { deviceWords } from '../../../src/features/account/device-words.ts';
import { calendarDays, untilWords } from '../../../src/features/assignments/due-words.ts';
import { timeAxis } from '../../../src/features/assignments/time-axis.ts';
import { setReaderZone, startOfDay, calendarDay } from '../../../src/stores/reader-zone.ts';

describe('the words for a device', () => {
  it.each([
    [
      'Mozilla/5.0 (X11; Linux x86_64) AppleWebKit/537.36 (KHTML, like Gecko) HeadlessChrome/140.0 Safari/537.36',
      'Chrome on Linux',
    ],
    [
      'Mozilla/5.0 (Windows NT 10.0; Win64; x64) AppleWebKit/537.36 Chrome/140.0 Safari/537.36 Edg/140.0',
      'Edge on Windows',
    ],
    ['Mozilla/5.0 (Windows NT 10.0; Win64; x64; rv:140.0) Gecko/20100101 Firefox/140.0', 'Firefox on Windows'],
    [
      'Mozilla/5.0 (iPhone; CPU iPhone OS 18_0 like Mac OS X) AppleWebKit/605.1 Version/18.0 Mobile Safari/604.1',
      'Safari on iPhone',
    ],
    [
      'Mozilla/5.0 (Linux; Android 15; Pixel) AppleWebKit/537.36 Chrome/140.0 Mobile Safari/537.36',
      'Chrome on Android',
    ],
    ['curl/8.5', 'A program'],
    [null, 'Unknown device'],
  ])('of %s are %s', (agent, words) => {
    expect(deviceWords(agent)).toBe(words);
  });
});

describe('times in the zone of the profile', () => {
  afterEach(() => setReaderZone(null));

  it('are counted by the days of that zone, whatever the device says', () => {
    // 1 June 2026, 20:00 UTC is 2 June, 01:45 in Kathmandu (UTC+5:45) and 1 June, 10:00 in Honolulu (UTC-10).
    const due = '2026-06-02T17:00:00.000Z';
    const now = new Date('2026-06-01T20:00:00.000Z');
    setReaderZone('Asia/Kathmandu');
    expect(untilWords(due, now)).toBe('today, 22:45');
    setReaderZone('Pacific/Honolulu');
    expect(untilWords(due, now)).toBe('tomorrow, 07:00');
    expect(calendarDays(new Date(due), now)).toBe(1);
  });

  it('begin a day at its midnight, also when clocks change that day', () => {
    setReaderZone('Europe/Oslo');
    const day = calendarDay(new Date('2026-10-25T12:00:00Z')); // clocks go back at 03:00 summer time
    expect(new Date(startOfDay(day)).toISOString()).toBe('2026-10-24T22:00:00.000Z');
    expect(startOfDay(day + 86_400_000) - startOfDay(day)).toBe(25 * 3600 * 1000);
    const axis = timeAxis([], new Date('2026-10-25T12:00:00Z'));
    expect(axis.days.filter(({ today }) => today)).toEqual([expect.objectContaining({ text: '25', weekend: true })]);
  });
});
