import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { SOFTWARE } from '@/agent/software';
import { textOf } from '@/tests/unit/structure/source';
import { isRecentAgent } from '@/lib/protocol/version';

describe('the age of an agent', () => {
  it.each([
    ['ellwand-agent 1.2.3', true],
    ['ellwand-agent 1.2.4', true],
    ['ellwand-agent 1.10.0', true],
    ['ellwand-agent 2.0.0', true],
    ['ellwand-agent 1.2.2', false],
    ['ellwand-agent 1.1.99', false],
    ['ellwand-agent 0.99.99', false],
    ['ellwand-agent 1.2', false],
    ['ellwand-agent 1.2.3-odd', false],
    ['something 9.9.9', false],
    ['', false],
    [null, false],
  ])('of %s against 1.2.3 is judged', (software, recent) => {
    expect(isRecentAgent(software, '1.2.3')).toBe(recent);
  });

  it('goes by the first number that differs', () => {
    const part = fc.integer({ min: 0, max: 999 });
    fc.assert(
      fc.property(fc.tuple(part, part, part), fc.tuple(part, part, part), (mine, least) => {
        const differing = mine.findIndex((value, index) => value !== least[index]);
        const newer = differing < 0 || (mine[differing] ?? 0) > (least[differing] ?? 0);
        expect(isRecentAgent(`ellwand-agent ${mine.join('.')}`, least.join('.'))).toBe(newer);
      }),
    );
  });

  it.each(['rigs', 'runs/[runId]/program'])('is asked for where a run begins: %s', (route) => {
    expect(textOf(`app/api/agent/${route}/route.ts`)).toContain('(authenticateRecentAgent, ');
  });

  it('of this very source is not too great for its own server', () => {
    expect(isRecentAgent(SOFTWARE)).toBe(true);
  });
});
