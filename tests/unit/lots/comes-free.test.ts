import { describe, expect, it } from 'vitest';
import { comesFree } from '@/lib/plan/comes-free';

const NOW_MS = 1_000_000;
const IDLE = { port: 'open', workHold: false, runner: 'idle' } as const;
const heard = (report: Partial<Record<keyof typeof IDLE, unknown>>, agoMs = 1000) => ({
  report: { ...IDLE, ...report } as typeof IDLE,
  heardAtMs: NOW_MS - agoMs,
});

describe('a report of an idle rig', () => {
  it.each([
    ['is the first one', null],
    ['comes after a silence', heard({}, 8_001)],
    ['comes after a closed port', heard({ port: 'closed' })],
    ['comes after a work hold', heard({ workHold: true })],
    ['comes after a run', heard({ runner: 'cutting' })],
  ])('asks for dispatch when it %s', (_when, last) => {
    expect(comesFree(last, IDLE, NOW_MS)).toBe(true);
  });

  it('asks for nothing when it says what was said before', () => {
    expect(comesFree(heard({}, 8_000), IDLE, NOW_MS)).toBe(false);
    expect(comesFree(heard({ runner: 'tray-full' }), IDLE, NOW_MS)).toBe(false);
  });

  it.each([{ port: 'closed' }, { workHold: true }, { runner: 'held' }] as const)(
    'with %j asks for nothing',
    (change) => {
      expect(comesFree(null, { ...IDLE, ...change }, NOW_MS)).toBe(false);
    },
  );
});
