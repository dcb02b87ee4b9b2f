import { describe, expect, it } from 'vitest';
import { summarise } from '@/scripts/bench/cut-to-screen/summary';
import type { PieceSeen } from '@/scripts/bench/cut-to-screen/match';

/** Pieces that took 1, 2, 3 … ms to the screen. */
function pieces(count: number): PieceSeen[] {
  return Array.from({ length: count }, (_, index) => ({
    runId: 'run',
    piece: index + 1,
    closedAtMs: 1000,
    seen: { atMs: 1001 + index, readAtMs: 1000, runId: 'run', cut: index + 1, lastPieceAtMs: 1000 },
  }));
}

const rest = { withoutBrowser: pieces(101), relayMs: [2, 2, 2], settings: { rigs: 8 } };

describe('the summary of cuts on their way to the screen', () => {
  it('is the 99th percentile over that of the bare relay', () => {
    const result = summarise({ ...rest, onScreen: pieces(101) });
    expect(result).toMatchObject({ value: 100, baseline: 2, ratio: 50, goal: 250 });
    expect(result.details).toMatchObject({ pieces: 101, p50Ms: 51, mostMs: 101, rigs: 8 });
  });

  it('refuses to speak when a piece was never shown', () => {
    const onScreen = pieces(101).map((piece, index) => (index === 7 ? { ...piece, seen: null } : piece));
    expect(() => summarise({ ...rest, onScreen })).toThrow('1 of 101');
  });

  it('refuses to speak of fewer than a hundred pieces', () => {
    expect(() => summarise({ ...rest, onScreen: pieces(99) })).toThrow('Only 99');
  });

  it('refuses to speak without anything to compare with', () => {
    expect(() => summarise({ ...rest, onScreen: pieces(101), relayMs: [] })).toThrow('relay');
  });
});
