import { describe, expect, it } from 'vitest';
import { ClassPresence } from '../../../server/realtime/class-presence.ts';
import { createRateLimits } from '../../../server/realtime/rate-limits.ts';
import { redacted } from '../../../server/services/classes/class-pages.ts';

describe('limits of a socket', () => {
  it('let a burst through, then as many as a second allows, and know no other events', () => {
    let nowMs = 0;
    const limits = createRateLimits(() => nowMs);
    const passed = (times: number) =>
      Array.from({ length: times }, () => limits('class:control')).filter((v) => v === 'ok').length;
    expect(passed(100)).toBe(40);
    nowMs += 1000;
    expect(passed(100)).toBe(10);
    nowMs += 3_600_000;
    expect(passed(100)).toBe(40);
    expect(limits('toString')).toBe('unknown');
  });
});

describe('presence over several processes', () => {
  it('counts a member once however many sockets, and forgets a process that fell silent', () => {
    const presence = new ClassPresence();
    expect(presence.arrive('c', 'a', 's1')).toBe(true);
    expect(presence.arrive('c', 'a', 's2')).toBe(false);
    expect(presence.hear('other', { c: ['a', 'b'] }, 1000)).toEqual([{ classId: 'c', member: 'b', here: true }]);
    expect(presence.depart('c', 'a', 's1')).toBe(false);
    expect(presence.depart('c', 'a', 's2')).toBe(false);
    expect(presence.present('c')).toEqual(['a', 'b']);
    expect(presence.isHosted('c')).toBe(false);
    expect(presence.forgetSilent(5000)).toEqual([]);
    expect(presence.forgetSilent(9000).map(({ member, here }) => [member, here])).toEqual([
      ['a', false],
      ['b', false],
    ]);
    expect(presence.depart('c', 'nobody', 's9')).toBe(false);
  });
});

describe('a message to one member', () => {
  it('keeps its place in the log of others, without its text', () => {
    const entry = { kind: 'message', seq: 4, atMs: 1, by: 'i', to: 'a', text: 'Well held' } as const;
    expect(redacted(entry, 'a')).toBe(entry);
    expect(redacted(entry, 'all')).toBe(entry);
    expect(redacted(entry, 'i')).toBe(entry);
    expect(redacted(entry, 'b')).toEqual({ ...entry, text: '' });
  });
});
