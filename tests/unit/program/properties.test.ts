import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkProgram } from '@/lib/program/check';
import { generateProgram } from '@/lib/program/generate';
import type { Profile } from '@/lib/program/profile';
import { readProgram } from '@/lib/program/read';
import type { ProgramStep, ReadProgram } from '@/lib/program/steps';
import { profilesWithOrders } from './arbitrary';

function readWhole(text: string, profile: Profile): ReadProgram {
  const reading = readProgram(text, profile);
  if (!reading.ok) throw new Error(reading.problems.map((problem) => problem.message).join('\n'));
  return reading.program;
}

const stepsOf = ({ preamble, home, trim, register, pieces, end }: ReadProgram): ProgramStep[] =>
  [preamble, home, trim, register, ...pieces, end].flat();

const feedsOf = (steps: ProgramStep[]) =>
  steps.flatMap((step) => (step.kind === 'feed' ? [step.feedTo] : []));

const PLAIN = /^(;@ (preamble|home|trim|register|end|piece \d+)|[GM]\d+( [A-Z](-?\d+(\.\d+)?)?)*)$/;

describe('for any profile and order, the generated program', () => {
  it('passes the reader and is what was ordered', () => {
    fc.assert(
      fc.property(profilesWithOrders, ({ profile, order }) => {
        expect(checkProgram(generateProgram(profile, order).text, profile, order)).toEqual([]);
      }),
      { numRuns: 200 },
    );
  });

  it('feeds every piece its length within 0.001 mm, in steps of 150 E units and the longest move at most', () => {
    fc.assert(
      fc.property(profilesWithOrders, ({ profile, order }) => {
        const { feedPerMm, longestMoveMm } = profile.feed;
        for (const piece of readWhole(generateProgram(profile, order).text, profile).pieces) {
          const targets = feedsOf(piece);
          expect(Math.abs((targets.at(-1) ?? 0) / feedPerMm - order.lengthMm)).toBeLessThan(0.001);
          const moves = targets.map((target, index) => target - (targets[index - 1] ?? 0));
          expect(Math.min(...moves)).toBeGreaterThan(0);
          expect(Math.max(...moves)).toBeLessThanOrEqual(Math.min(150, longestMoveMm * feedPerMm) + 1e-6);
        }
      }),
      { numRuns: 100 },
    );
  });

  it('keeps the cut axis within its travel and moves no other axis', () => {
    fc.assert(
      fc.property(profilesWithOrders, ({ profile, order }) => {
        const { axis, lowestMm, highestMm } = profile.cutAxis;
        const { text } = generateProgram(profile, order);
        const moves = Array.from(text.matchAll(/^G[01] ([A-Z])(-?[\d.]+)/gm), ([, letter, value]) => ({
          letter,
          to: Number(value),
        }));
        expect(new Set(moves.map((move) => move.letter))).toEqual(new Set(['E', axis]));
        const positions = moves.flatMap((move) => (move.letter === axis ? [move.to] : []));
        expect(Math.min(...positions)).toBeGreaterThanOrEqual(lowestMm - 0.0006);
        expect(Math.max(...positions)).toBeLessThanOrEqual(highestMm + 0.0006);
      }),
      { numRuns: 100 },
    );
  });

  it('has lines that fit 80 characters with an eight-digit number and checksum, in capitals and plain numbers', () => {
    fc.assert(
      fc.property(profilesWithOrders, ({ profile, order }) => {
        const lines = generateProgram(profile, order).text.trimEnd().split('\n');
        const unfit = lines.filter((line) => `N12345678 ${line}*255`.length > 80 || !PLAIN.test(line));
        expect(unfit).toEqual([]);
      }),
      { numRuns: 100 },
    );
  });

  it('takes as long by the reader as by the generator, who each compute it on their own', () => {
    fc.assert(
      fc.property(profilesWithOrders, ({ profile, order }) => {
        const generated = generateProgram(profile, order);
        const steps = stepsOf(readWhole(generated.text, profile));
        const moves = steps.filter((step) => ['feed', 'cut', 'standby', 'park'].includes(step.kind));
        const readS = moves.reduce((sum, step) => sum + step.expectedMs, 0) / 1000;
        const { homing, highestMm, lowestMm, speedMmS } = profile.cutAxis;
        const homingS = homing === 'endstop' ? (highestMm - lowestMm) / Math.min(speedMmS, 4) : 0;
        const linesS = steps.length * 0.002;
        // Printed positions are rounded; a slow ramp makes a ten-thousandth of a mm last some milliseconds.
        const tolerance = 0.02 * moves.length;
        expect(Math.abs(generated.durationS - homingS - linesS - readS)).toBeLessThan(tolerance);
      }),
      { numRuns: 100 },
    );
  });
});
