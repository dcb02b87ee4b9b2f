import { describe, expect, it } from 'vitest';
import { matchPieces, type JawsClosed, type Sighting } from '@/scripts/bench/cut-to-screen/match';

const RUN = 'run one';
const NEXT = 'run two';

const closed = (atMs: number, register = 0): JawsClosed => ({ atMs, register });

function seen(atMs: number, cut: number, runId = RUN): Sighting {
  return { atMs, readAtMs: atMs - 1, runId, cut, lastPieceAtMs: null };
}

/** Trim, then pieces, as a rig with a register tallies them. */
const TALLY = [closed(100), closed(200, 170_000), closed(300, 170_001), closed(400, 170_002)];

describe('pieces on their way to the screen', () => {
  it('are seen when the count first reaches them, the trim left out', () => {
    const told = [seen(150, 0), seen(230, 1), seen(240, 1), seen(330, 2), seen(450, 3)];
    const pieces = matchPieces(TALLY, told);
    expect(pieces.map(({ piece, closedAtMs, seen: by }) => [piece, closedAtMs, by?.atMs])).toEqual([
      [1, 200, 230],
      [2, 300, 330],
      [3, 400, 450],
    ]);
  });

  it('that one message tells together are seen by that message', () => {
    const pieces = matchPieces(TALLY, [seen(150, 0), seen(420, 3)]);
    expect(pieces.map(({ seen: by }) => by?.atMs)).toEqual([420, 420, 420]);
  });

  it('that no message tells are not seen', () => {
    const pieces = matchPieces(TALLY, [seen(150, 0), seen(230, 1)]);
    expect(pieces.map(({ seen: by }) => by?.atMs ?? null)).toEqual([230, null, null]);
  });

  it('of the next run begin after its trim', () => {
    const tally = [...TALLY, closed(500, 170_003), closed(600, 180_000)];
    const told = [seen(150, 0), seen(450, 3), seen(550, 0, NEXT), seen(640, 1, NEXT)];
    const last = matchPieces(tally, told).at(-1);
    expect(last).toMatchObject({ runId: NEXT, piece: 1, closedAtMs: 600, seen: { atMs: 640 } });
  });

  it('are told by their order alone where the rig has no register', () => {
    const tally = TALLY.map(({ atMs }) => closed(atMs));
    expect(matchPieces(tally, [seen(150, 0), seen(450, 3)])).toHaveLength(3);
  });

  it('are not guessed when the register says another piece', () => {
    const tally = [closed(100), closed(200, 170_000), closed(300, 170_000)];
    expect(() => matchPieces(tally, [seen(150, 0), seen(350, 2)])).toThrow('do not agree');
  });
});
