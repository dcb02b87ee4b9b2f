import { describe, expect, it } from 'vitest';
import { control } from '@/agent/virtual/core/controls';
import { preparedRig, type RigAtHand } from './rig-at-hand';

/** One piece as a run's program has it: feed, cut, wait, ask, count with the jaws shut, open. */
function cutPiece(rig: RigAtHand, lengthMm: number, register: number): void {
  rig.runAll(`G1 E${lengthMm} F3000`, 'G1 Z-4 F1200', 'M400', 'M114', `G92 Y${register} E0`, 'G1 Z-1 F1200');
}

function cutPieces(rig: RigAtHand, lengthMm: number, pieces: number): void {
  rig.run('G92 Y420000 E0');
  for (let piece = 1; piece <= pieces; piece += 1) cutPiece(rig, lengthMm, 420_000 + piece);
  rig.run('M400');
}

describe('the tally of a run', () => {
  it('has one severed closing of the true length for each piece, with the register before it', () => {
    const rig = preparedRig();
    cutPieces(rig, 114.02, 3);
    const closings = rig.tallied('closing');
    expect(closings.map((closing) => closing.register)).toEqual([420_000, 420_001, 420_002]);
    expect(closings.every((closing) => closing.severed && !closing.guardOpen)).toBe(true);
    for (const closing of closings) expect(Math.abs(closing.wireMm - 114.02)).toBeLessThan(0.02);
    expect(closings.map((closing) => closing.feedMm)).toEqual([114.02, 114.02, 114.02]);
  });

  // By hand: 114.02 mm at 50 mm/s and 1000 mm/s² 2.3304 s, 3 mm at 20 and 500 0.19 s twice.
  it('tells the ideal motion of each piece by the difference of two closings', () => {
    const rig = preparedRig();
    cutPieces(rig, 114.02, 3);
    const [first, second] = rig.tallied('closing');
    const idealMs = (second?.motionMs ?? 0) - (first?.motionMs ?? 0);
    expect(idealMs).toBeCloseTo(2330.4 + 190 + 190, 0);
    expect((second?.atMs ?? 0) - (first?.atMs ?? 0)).toBeCloseTo(idealMs, 3);
  });

  it('has nothing twice when every line is sent twice', () => {
    const rig = preparedRig();
    rig.run('G92 Y420000 E0');
    for (const line of ['G1 E60 F3000', 'G1 Z-4 F1200', 'M400', 'M114', 'G92 Y420001 E0', 'G1 Z-1']) {
      rig.runAll(line, line);
    }
    rig.run('M400');
    expect(rig.tallied('closing')).toHaveLength(1);
    expect(rig.core.mechanics.wire.pastJawsMm).toBe(0);
  });

  it('has a double length after a closing that did not sever', () => {
    const rig = preparedRig();
    control(rig.core, { do: 'blade', state: 'dull', uncut: 1 });
    cutPieces(rig, 50, 1);
    control(rig.core, { do: 'blade', state: 'new', uncut: 1 });
    cutPieces(rig, 50, 1);
    const closings = rig.tallied('closing');
    expect(closings.map((closing) => closing.severed)).toEqual([false, true]);
    expect(closings[1]?.wireMm).toBeCloseTo(100, 1);
  });

  it('severs nothing where there is no wire', () => {
    const rig = preparedRig();
    rig.runAll('G1 Z-4 F1200', 'M400');
    expect(rig.tallied('closing').map(({ wireMm, severed }) => [wireMm, severed])).toEqual([[0, false]]);
  });

  it('does not count the jaws as closing again before they have opened', () => {
    const rig = preparedRig();
    rig.runAll('G1 Z-4 F1200', 'G1 Z-3.5', 'G1 Z-4', 'M400');
    expect(rig.tallied('closing')).toHaveLength(1);
  });
});

describe('the feed', () => {
  it('slips by a share that the seed decides, the same again for the same seed', () => {
    const lengths = (seed: number) => {
      const rig = preparedRig({ seed, mechanics: { slip: { mean: 0.01, sd: 0.005 } } });
      cutPieces(rig, 100, 50);
      return rig.tallied('closing').map((closing) => closing.wireMm);
    };
    const first = lengths(7);
    expect(lengths(7)).toEqual(first);
    expect(lengths(8)).not.toEqual(first);
    const mean = first.reduce((sum, length) => sum + length, 0) / first.length;
    // Four standard errors: 100 · 0.005 / sqrt(50) = 0.0707.
    expect(Math.abs(mean - 99)).toBeLessThan(4 * 0.0707);
    expect(new Set(first).size).toBeGreaterThan(40);
  });

  it('is wrong by the factor of a bad calibration', () => {
    const rig = preparedRig({ mechanics: { wirePerUnit: 0.89 } });
    cutPieces(rig, 100, 1);
    expect(rig.tallied('closing')[0]?.wireMm).toBeCloseTo(89, 1);
  });

  it('brings no wire in a jam, past shut jaws, or with the wire pulled out', () => {
    const rig = preparedRig();
    control(rig.core, { do: 'jam', on: true });
    rig.runAll('G1 E20 F3000', 'M400');
    control(rig.core, { do: 'jam', on: false });
    control(rig.core, { do: 'wire', out: true });
    rig.runAll('G1 E40', 'M400');
    control(rig.core, { do: 'wire', out: false });
    rig.runAll('G1 Z-4 F1200', 'G1 E60', 'M400');
    expect(rig.core.mechanics.wire.pastJawsMm).toBe(0);
  });

  it('goes on with the tail after the spool has ended, and then brings nothing', () => {
    const rig = preparedRig({ mechanics: { spoolMm: 30, tailMm: 25 } });
    cutPieces(rig, 40, 2);
    expect(rig.tallied('wire').map((event) => event.present)).toEqual([false]);
    const lengths = rig.tallied('closing').map((closing) => closing.wireMm);
    expect(lengths[0]).toBeCloseTo(40, 1);
    expect(lengths[1]).toBeCloseTo(15, 1);
  });
});

describe('the blade', () => {
  it('leaves more wire uncut the older it is', () => {
    const uncut = (cuts: number) => {
      const rig = preparedRig({ mechanics: { blade: { cuts, lifeCuts: 1000, shape: 3 } } });
      cutPieces(rig, 10, 300);
      return rig.tallied('closing').filter((closing) => !closing.severed).length;
    };
    expect(uncut(0)).toBeLessThanOrEqual(2);
    // Between 2,000 and 2,300 cuts the chance is 16 to 24 in 100.
    expect(uncut(2000)).toBeGreaterThan(30);
  });
});
