import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { readPosition } from '@/agent/dialect/position';
import { checkProgram } from '@/lib/program/check';
import { pieceDurationS, programDurationS } from '@/lib/program/duration';
import { generateProgram } from '@/lib/program/generate';
import type { Profile, RunOrder } from '@/lib/program/profile';
import { RigAtHand } from '@/tests/unit/virtual/rig-at-hand';
import { lots } from './profiles';
import { rigOfProfile } from './rig-of-profile';
import { SEED } from './seed';

interface Lot {
  profile: Profile;
  order: RunOrder;
}

/** The piece's length in the tally may be off by the last step of the feed. */
const LENGTH_MM = 0.05;
/** The agent takes a place for reached when the two printed decimals differ from it by no more. */
const PRINTED_MM = 0.011;

/** Every command of the lot's program on a rig that is built as its profile says, each sent `times` times. */
function cutLot({ profile, order }: Lot, times: 1 | 2) {
  const { text } = generateProgram(profile, order);
  const rig = new RigAtHand(rigOfProfile(profile));
  let homingMs = 0;
  const said: string[] = [];
  for (const line of text.split('\n').filter((each) => each !== '' && !each.startsWith(';'))) {
    for (let time = 0; time < times; time += 1) said.push(...rig.run(line));
    if (line.startsWith('G28')) homingMs = rig.core.firmware.stepper.motionMs;
  }
  const { motionMs } = rig.core.firmware.stepper;
  return { text, rig, said, motionMs: motionMs - homingMs };
}

/** What the tally holds but for homings, of which the second finds the axis on its switch; closings are apart. */
function deeds({ rig }: ReturnType<typeof cutLot>) {
  const other = rig.tally.filter(({ kind }) => kind !== 'homed' && kind !== 'closing');
  return other.map(({ atMs: _atMs, ...deed }) => deed);
}

/** Closings as the tally has them, and their wire, which two sums of the same moves may round another way. */
function closings({ rig }: ReturnType<typeof cutLot>) {
  const all = rig.tallied('closing');
  const exact = all.map(({ severed, register, feedMm, bladeCuts }) => ({
    severed,
    register,
    feedMm,
    bladeCuts,
  }));
  return { exact, wireMm: all.map(({ wireMm }) => wireMm) };
}

function within(share: number, value: number, wanted: number): void {
  expect(Math.abs(value - wanted)).toBeLessThanOrEqual(share * wanted);
}

const each = (judge: (lot: Lot) => void, numRuns = 200) =>
  fc.assert(fc.property(lots, judge), { seed: SEED, numRuns });

describe('for any sound profile and any lot that it allows', () => {
  it('the program is found within the limits, by the reader and by the virtual rig’s own tally', () => {
    each((lot) => {
      const { text, rig, said } = cutLot(lot, 1);
      expect(checkProgram(text, lot.profile, lot.order)).toEqual([]);
      expect(rig.tallied('limit-exceeded')).toEqual([]);
      expect(said.filter((line) => !/^(ok|X:|echo:Soft endstops:)/.test(line))).toEqual([]);
    });
  });

  it('as many pieces come out as went in, each severed, of its length and under its own number', () => {
    each((lot) => {
      const { profile, order } = lot;
      const { rig } = cutLot(lot, 1);
      const [trim, ...pieces] = rig.tallied('closing');
      expect(trim?.wireMm).toBeCloseTo(profile.feed.trimMm, 1);
      expect(pieces).toHaveLength(order.pieces);
      for (const [index, piece] of pieces.entries()) {
        expect(piece.severed).toBe(true);
        expect(Math.abs(piece.wireMm - order.lengthMm)).toBeLessThan(LENGTH_MM);
        if (profile.registerAxis !== null) expect(piece.register).toBe(order.tag * 10_000 + index);
      }
    });
  });

  it('the rig’s answer before a piece is counted shows the whole feed and the cut, as near as the agent asks', () => {
    each((lot) => {
      const { profile, order } = lot;
      const { said } = cutLot(lot, 1);
      const told = said.flatMap((line) => readPosition(line) ?? []);
      const wholeUnits = order.lengthMm * profile.feed.feedPerMm;
      const whole = told.filter(({ E }) => Math.abs(E - wholeUnits) <= PRINTED_MM);
      const shut = whole.filter(
        (at) => Math.abs(at[profile.cutAxis.axis] - profile.cutAxis.cutMm) <= PRINTED_MM,
      );
      expect(shut.length).toBeGreaterThanOrEqual(order.pieces);
    });
  });

  it('every line may be sent twice: the same closings, no motion more, the same place at the end', () => {
    each((lot) => {
      const once = cutLot(lot, 1);
      const twice = cutLot(lot, 2);
      expect(deeds(twice)).toEqual(deeds(once));
      const [cutTwice, cutOnce] = [closings(twice), closings(once)];
      expect(cutTwice.exact).toEqual(cutOnce.exact);
      cutTwice.wireMm.forEach((wireMm, index) => expect(wireMm).toBeCloseTo(cutOnce.wireMm[index] ?? NaN, 2));
      expect(twice.motionMs).toBeCloseTo(once.motionMs, 3);
      expect(readPosition(twice.said.at(-2) ?? '')).toEqual(readPosition(once.said.at(-2) ?? ''));
    });
  });

  it('the duration is that of the virtual rig’s motion within 1 %, of the whole and of each piece', () => {
    each((lot) => {
      const { profile, order } = lot;
      const { rig, motionMs } = cutLot(lot, 1);
      // How fast a firmware homes, it keeps to itself: homing is left out on both sides.
      const unhomed: Profile = { ...profile, cutAxis: { ...profile.cutAxis, homing: 'declared' } };
      within(0.01, programDurationS(unhomed, order, 0) * 1000, motionMs);
      const [, ...pieces] = rig.tallied('closing');
      for (const [index, piece] of pieces.slice(1).entries()) {
        const pieceMs = piece.motionMs - (pieces[index]?.motionMs ?? 0);
        within(0.01, pieceDurationS(profile, order.lengthMm, 0) * 1000, pieceMs);
      }
    });
  });
});
