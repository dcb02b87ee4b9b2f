import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { shiftBeganAt } from '@/lib/fleet/shift';

const SHIFTS = ['06:00', '14:00', '22:00'];
const began = (now: string, shifts = SHIFTS, zone = 'Europe/Vienna') =>
  shiftBeganAt(new Date(now), shifts, zone).toISOString();

describe('the shift that runs', () => {
  it.each([
    // Winter in Vienna is UTC+1.
    ['a millisecond before the day shift', '2026-12-01T04:59:59.999Z', '2026-11-30T21:00:00.000Z'],
    ['the very start of the day shift', '2026-12-01T05:00:00.000Z', '2026-12-01T05:00:00.000Z'],
    ['the late shift', '2026-12-01T20:59:59.999Z', '2026-12-01T13:00:00.000Z'],
    ['the night shift after midnight', '2026-12-01T02:00:00.000Z', '2026-11-30T21:00:00.000Z'],
    // Summer is UTC+2.
    ['summer time', '2026-07-01T04:00:00.000Z', '2026-07-01T04:00:00.000Z'],
  ])('began as the local clock says: %s', (_case, now, expected) => {
    expect(began(now)).toBe(expected);
  });

  it('began before the clocks were put on in the night, counted in real hours', () => {
    // 2026-03-29, 02:00 becomes 03:00: at 05:59 summer time the night shift has run for seven hours.
    expect(began('2026-03-29T03:59:00Z')).toBe('2026-03-28T21:00:00.000Z');
    expect(began('2026-03-29T04:00:00Z')).toBe('2026-03-29T04:00:00.000Z');
  });

  it('began before the clocks were put back in the night, counted in real hours', () => {
    // 2026-10-25, 03:00 becomes 02:00 again.
    expect(began('2026-10-25T04:59:00Z')).toBe('2026-10-24T20:00:00.000Z');
    expect(began('2026-10-25T05:00:00Z')).toBe('2026-10-25T05:00:00.000Z');
  });

  it('begins at the change when its start is left out of the day', () => {
    expect(began('2026-03-29T00:59:59.999Z', ['02:30'])).toBe('2026-03-28T01:30:00.000Z');
    expect(began('2026-03-29T01:00:00.000Z', ['02:30'])).toBe('2026-03-29T01:00:00.000Z');
  });

  it('begins at the first of two equal readings of the clock', () => {
    expect(began('2026-10-25T01:45:00Z', ['02:30'])).toBe('2026-10-25T00:30:00.000Z');
  });

  it('knows zones that are not whole hours away, and days that end elsewhere', () => {
    expect(began('2026-06-01T00:14:00Z', ['06:00'], 'Asia/Kathmandu')).toBe('2026-05-31T00:15:00.000Z');
    expect(began('2026-06-01T12:00:00Z', ['00:00'], 'America/Los_Angeles')).toBe('2026-06-01T07:00:00.000Z');
  });

  it('began at or before now, and never more than 25 hours ago', () => {
    const minutes = fc.integer({ min: 0, max: 24 * 60 - 1 });
    const clock = (minute: number) =>
      `${String(Math.floor(minute / 60)).padStart(2, '0')}:${String(minute % 60).padStart(2, '0')}`;
    fc.assert(
      fc.property(
        fc.integer({ min: Date.UTC(2020, 0, 1), max: Date.UTC(2035, 0, 1) }),
        fc.array(minutes.map(clock), { minLength: 1, maxLength: 6 }),
        fc.constantFrom('Europe/Vienna', 'America/New_York', 'Australia/Lord_Howe', 'UTC'),
        (now, shifts, zone) => {
          const agoMs = now - shiftBeganAt(new Date(now), shifts, zone).getTime();
          expect(agoMs).toBeGreaterThanOrEqual(0);
          expect(agoMs).toBeLessThanOrEqual(25 * 3_600_000);
        },
      ),
    );
  });
});
