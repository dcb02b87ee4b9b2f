import { describe, expect, it } from 'vitest';
import { busyOf, type RigStanding } from '@/lib/plan/busy';
import { RUN_STATES } from '@/lib/fleet/run';
import { RUNNER_STATES } from '@/lib/protocol/report';

const FREE: RigStanding = {
  nowMs: 1_000_000,
  outOfService: false,
  workHold: false,
  heardAtMs: 1_000_000,
  connected: true,
  runner: 'idle',
  run: null,
};
const doing = (change: Partial<RigStanding>) => busyOf({ ...FREE, ...change })?.doing ?? null;

describe('a rig', () => {
  it('is free when it is heard, in service, without hold, run and earlier work', () => {
    expect(doing({})).toBeNull();
    expect(doing({ heardAtMs: FREE.nowMs - 8_000 })).toBeNull();
  });

  it.each([
    [{ heardAtMs: FREE.nowMs - 8_001 }, 'silent'],
    [{ heardAtMs: null }, 'silent'],
    [{ connected: false }, 'silent'],
    [{ workHold: true }, 'work hold'],
    [{ outOfService: true, workHold: true, heardAtMs: null }, 'out of service'],
  ] as const)('with %j is not', (change, why) => {
    expect(doing(change)).toBe(why);
  });

  it('is free of a run only when the run is cleared or dropped', () => {
    const order = { pieces: 100, cut: 25, expectedS: 400 };
    const free = RUN_STATES.filter((state) => doing({ run: { ...order, state } }) === null);
    expect(free).toEqual(['cleared', 'dropped']);
  });

  it('is free of its agent’s earlier work only when that is over', () => {
    const free = RUNNER_STATES.filter((runner) => doing({ runner }) === null);
    expect(free).toEqual(['idle', 'tray-full']);
  });

  it('that cuts is expected free when the rest of its pieces is cut', () => {
    const run = { state: 'cutting' as const, pieces: 100, cut: 25, expectedS: 400 };
    expect(busyOf({ ...FREE, run })?.freeAt).toEqual(new Date(FREE.nowMs + 300_000));
  });
});
