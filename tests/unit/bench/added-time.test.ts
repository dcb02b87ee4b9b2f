import { describe, expect, it } from 'vitest';
import { addedPerPiece, type Passed } from '@/scripts/bench/agent-time/added-time';

/** `>` goes to the rig, `<` comes from it; a line each. */
function traffic(...lines: [atMs: number, text: string][]): Passed[] {
  return lines.map(([atMs, text]) => ({
    towards: text.startsWith('>') ? 'rig' : 'agent',
    atMs,
    text: `${text.slice(1)}\n`,
  }));
}

const OPENED = traffic([0, '>N8 G92 Y170000 E0*1'], [1, '<X:0.00 Y:170000.00'], [1, '<ok']);

describe('the time that an agent adds to a piece', () => {
  it('is summed from answer to next line, over all lines up to the register', () => {
    const piece = traffic(
      [3, '>N9 G1 E60 F3000*1'],
      [10, '<ok'],
      [10.5, '>N10 G1 Z5.5 F1500*1'],
      [12, '<ok'],
      [13, '>N11 M400*1'],
      [900, '<ok'],
      [901, '>N12 G92 Y170001 E0*1'],
    );
    expect(addedPerPiece([...OPENED, ...piece])).toEqual([
      { totalMs: 4.5, byLine: { 'G1 E': 2, 'G1 Z5.5': 0.5, M400: 1, 'G92 Y': 1 } },
    ]);
  });

  it('does not count the time in which the rig answers', () => {
    const piece = traffic([1, '>N9 M400*1'], [5001, '<ok'], [5001, '>N10 G92 Y170001 E0*1']);
    expect(addedPerPiece([...OPENED, ...piece])[0]?.totalMs).toBe(0);
  });

  it('counts a line that is written again after silence only once', () => {
    const piece = traffic(
      [2, '>N9 M400*1'],
      [3000, '>'],
      [3100, '>N9 M400*1'],
      [3200, '<ok'],
      [3201, '>N10 G92 Y170001 E0*1'],
    );
    expect(addedPerPiece([...OPENED, ...piece])[0]?.totalMs).toBe(2);
  });

  it('takes an answer as come when its last chunk came', () => {
    const cut: Passed[] = [
      { towards: 'rig', atMs: 1, text: 'N9 M400*1\n' },
      { towards: 'agent', atMs: 50, text: 'o' },
      { towards: 'agent', atMs: 60, text: 'k\n' },
      { towards: 'rig', atMs: 61, text: 'N10 G92 Y170001 E0*1\n' },
    ];
    expect(addedPerPiece([...OPENED, ...cut])[0]?.totalMs).toBe(1);
  });

  it('leaves out what lies between one run and the opening of the next', () => {
    const first = traffic([1, '>N9 G92 Y170001 E0*1'], [2, '<ok']);
    const idle = traffic(
      [500, '>N10 M105*1'],
      [501, '<ok T:20'],
      [700, '>N11 G92 Y180000 E0*1'],
      [701, '<ok'],
    );
    const second = traffic([704, '>N12 G92 Y180001 E0*1']);
    const pieces = addedPerPiece([...OPENED, ...first, ...idle, ...second]);
    expect(pieces.map(({ totalMs }) => totalMs)).toEqual([0, 3]);
  });

  it('times no piece of a run whose opening it has not seen', () => {
    expect(addedPerPiece(traffic([1, '>N9 G92 Y170004 E0*1'], [2, '<ok'], [3, '>N10 M400*1']))).toEqual([]);
  });
});
