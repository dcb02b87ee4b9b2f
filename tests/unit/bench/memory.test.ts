import { describe, expect, it } from 'vitest';
import { familyOf, parseStatus } from '@/scripts/bench/memory/processes';
import { summarise, type Sample } from '@/scripts/bench/memory/summary';

const one = (pid: number, parentPid: number) => ({ pid, parentPid, rssMb: 1 });

describe('the processes of a house', () => {
  it('are read from what the kernel says', () => {
    const status = 'Name:\tnode\nPPid:\t41\nVmHWM:\t  90000 kB\nVmRSS:\t  51200 kB\n';
    expect(parseStatus(42, status)).toEqual({ pid: 42, parentPid: 41, rssMb: 50 });
  });

  it('leave out those without memory', () => {
    expect(parseStatus(2, 'Name:\tkthreadd\nPPid:\t0\n')).toBeUndefined();
  });

  it('count with all that descend from them, and nobody else', () => {
    const all = [one(10, 1), one(11, 10), one(12, 11), one(20, 1)];
    expect(familyOf(10, all).map(({ pid }) => pid)).toEqual([10, 11, 12]);
  });
});

/** Ten samples a minute apart that grow by `perMinute` in the second half only. */
function samples(firstMb: number, perMinute: number): Sample[] {
  return Array.from({ length: 10 }, (_, minute) => ({
    atMs: minute * 60_000,
    rssMb: firstMb + Math.max(0, minute - 5) * perMinute,
    processes: 1,
  }));
}

describe('the summary of memory', () => {
  it('is the most that any agent held, over an empty process', () => {
    const all = new Map([
      ['web', samples(200, 0)],
      ['agent 1', samples(70, 2)],
      ['agent 2', samples(75, 0)],
    ]);
    const result = summarise(all, [38, 42], { rigs: 8 });
    expect(result).toMatchObject({ value: 78, baseline: 40, ratio: 1.95, goal: 90 });
    expect(result.details).toMatchObject({ agentGrowthMbPerMinute: 2, rigs: 8 });
    expect(result.details.processes).toContainEqual(
      expect.objectContaining({ name: 'agent 2', growthMbPerMinute: 0, medianMb: 75, lastMb: 75 }),
    );
  });

  it('refuses to speak where no agent was', () => {
    expect(() => summarise(new Map([['web', samples(200, 0)]]), [40], {})).toThrow('No agent');
  });

  it('refuses to speak after too few samples', () => {
    const few = new Map([['agent 1', samples(70, 0).slice(0, 5)]]);
    expect(() => summarise(few, [40], {})).toThrow('agent 1');
  });
});
