import { describe, expect, it } from 'vitest';
import { may, RIGHTS, ROLES, type Right } from '@/lib/fleet/rights';

const rights = Object.keys(RIGHTS) as Right[];

describe('rights', () => {
  it('let everybody stop a run and let nobody without a role do anything', () => {
    for (const role of ROLES) expect(may([role], 'runs.stop')).toBe(true);
    for (const right of rights) expect(may([], right)).toBe(false);
  });

  it('let an owner do everything', () => {
    expect(rights.filter((right) => !may(['owner'], right))).toEqual([]);
  });

  it('do not let a scheduler start a rig nor an operator make batches', () => {
    expect(may(['scheduler'], 'runs.operate')).toBe(false);
    expect(may(['operator'], 'batches.write')).toBe(false);
  });

  it('add up when a person holds several roles', () => {
    expect(may(['operator', 'scheduler'], 'batches.write')).toBe(true);
    expect(may(['operator', 'scheduler'], 'runs.operate')).toBe(true);
  });
});
