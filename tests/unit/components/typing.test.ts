import { describe, expect, it } from 'vitest';
import { typedLengthMm } from '@/components/rig/measure-panel';
import { stateNow } from '@/components/live/freshness';
import { ageWords, wallClock } from '@/components/live/time';
import { typeKey } from '@/components/ui/keypad';
import { SILENT_AFTER_MS } from '@/lib/fleet/rig-state';
import { aRig } from '../fleet/a-rig';

describe('the keypad', () => {
  it('takes one decimal point, deletes the last character and stops at its length', () => {
    expect(typeKey('12.', '.', 7)).toBe('12.');
    expect(typeKey('12.5', 'back', 7)).toBe('12.');
    expect(typeKey('', 'back', 7)).toBe('');
    expect(typeKey('1234', '5', 4)).toBe('1234');
  });
});

describe('a typed length', () => {
  it.each([
    ['84', 84],
    ['84,25', 84.25],
    ['84.25', 84.25],
    ['', null],
    ['0', null],
    ['-3', null],
    ['84 mm', null],
  ])('%j is %j mm', (text, lengthMm) => {
    expect(typedLengthMm(text)).toBe(lengthMm);
  });
});

describe('law 11: age is told, and what is too old is not shown as fact', () => {
  const rig = aRig({ state: 'cutting', heardAt: '2026-12-01T13:00:00.000Z' });
  const heardMs = Date.parse('2026-12-01T13:00:00.000Z');

  it('turns an answer into silent by itself once its limit has passed', () => {
    expect(stateNow(rig, heardMs + SILENT_AFTER_MS)).toBe('cutting');
    expect(stateNow(rig, heardMs + SILENT_AFTER_MS + 1)).toBe('silent');
  });

  it('writes an age in the largest unit that fits', () => {
    expect([0, 89_000, 90_000, 7_200_000, 259_200_000].map(ageWords)).toEqual([
      '0 s',
      '89 s',
      '2 min',
      '2 h',
      '3 days',
    ]);
  });

  it('adds the day to a time that is not of today, in the workshop’s zone', () => {
    expect(wallClock('2026-12-01T23:30:00.000Z', 'Europe/Vienna', heardMs)).toBe('Wed 2 Dec, 00:30');
    expect(wallClock('2026-12-01T08:05:00.000Z', 'Europe/Vienna', heardMs)).toBe('09:05');
  });
});
