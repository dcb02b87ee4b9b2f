import { describe, expect, it } from 'vitest';
import { speakTimeIn } from '@/lib/plan/spoken-time';
import { momentOfWallTime, wallTimeOf } from '@/lib/plan/wall-time';

const VIENNA = 'Europe/Vienna';

describe('a time of the workshop’s clock', () => {
  it.each([
    ['2026-12-01T14:05', VIENNA, '2026-12-01T13:05:00.000Z'],
    ['2026-07-01T14:05', VIENNA, '2026-07-01T12:05:00.000Z'],
    ['2026-12-01T00:30', 'Pacific/Auckland', '2026-11-30T11:30:00.000Z'],
    ['2026-12-01T23:30', 'America/Los_Angeles', '2026-12-02T07:30:00.000Z'],
  ])('%s in %s is %s, and back', (text, timeZone, at) => {
    expect(momentOfWallTime(text, timeZone)).toBe(at);
    expect(wallTimeOf(at, timeZone)).toBe(text);
  });

  it('that comes twice is the first, and one that is left out is an hour later', () => {
    expect(momentOfWallTime('2026-10-25T02:30', VIENNA)).toBe('2026-10-25T00:30:00.000Z');
    expect(momentOfWallTime('2026-03-29T02:30', VIENNA)).toBe('2026-03-29T01:30:00.000Z');
  });

  it.each(['', '2026-13-01T10:00', '2026-02-30T10:00', '2026-12-01', 'soon'])('is none in %j', (text) => {
    expect(momentOfWallTime(text, VIENNA)).toBeNull();
  });
});

describe('a spoken time', () => {
  const speak = speakTimeIn(VIENNA, new Date('2026-12-01T12:00:00Z'));
  it.each([
    ['2026-12-01T13:20:00Z', '14:20'],
    ['2026-12-01T13:20:01Z', '14:30'],
    ['2026-12-01T22:55:00Z', 'Wednesday 00:00'],
    ['2026-12-03T08:00:00Z', 'Thursday 09:00'],
  ])('of %s is %s', (at, words) => {
    expect(speak(new Date(at))).toBe(words);
  });
});
