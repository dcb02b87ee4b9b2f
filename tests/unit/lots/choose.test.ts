import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { chooseGifts, compareTurns, fits } from '@/lib/plan/choose';
import { BUSY_DOINGS, type LotToGive, type RigToFill } from '@/lib/plan/work';

const NOON = new Date('2026-12-01T12:00:00Z');
const hoursLater = (hours: number): Date => new Date(NOON.getTime() + hours * 3_600_000);
const spoken = (at: Date): string => at.toISOString().slice(11, 16);

const LOT: LotToGive = {
  lotId: 'lot',
  priority: 3,
  dueAt: null,
  queuedAt: NOON,
  order: [1, 1, 1],
  wireId: 'GN',
  wireName: 'GN 30 AWG',
  lengthMm: 100,
  pieces: 200,
};
const RIG: RigToFill = {
  rigId: 'curlew',
  name: 'Curlew',
  benchOrder: 1,
  wireId: 'GN',
  spoolLeftMm: 90_000,
  limits: { shortestPieceMm: 10, longestPieceMm: 500, trimMm: 20 },
  busy: null,
};
const lot = (change: Partial<LotToGive>): LotToGive => ({ ...LOT, ...change });
const rig = (change: Partial<RigToFill>): RigToFill => ({ ...RIG, ...change });

describe('a free rig', () => {
  const first: [string, Partial<LotToGive>, Partial<LotToGive>][] = [
    ['of the lower priority number', { priority: 1 }, { priority: 2, dueAt: NOON }],
    ['that is due sooner', { dueAt: hoursLater(1), queuedAt: hoursLater(2) }, { dueAt: hoursLater(2) }],
    ['that is due at all', { dueAt: hoursLater(99), queuedAt: hoursLater(2) }, { dueAt: null }],
    ['that was queued sooner', { queuedAt: NOON, order: [9, 9, 9] }, { queuedAt: hoursLater(1) }],
    ['of the earlier line', { order: [1, 2, 9] }, { order: [1, 3, 1] }],
  ];
  it.each(first)('gets the lot %s', (_which, wins, loses) => {
    const lots = [lot({ ...loses, lotId: 'loses' }), lot({ ...wins, lotId: 'wins' })];
    expect(chooseGifts(lots, [RIG], spoken).gifts).toEqual([{ lotId: 'wins', rigId: 'curlew' }]);
  });

  it('with the least wire that is enough goes first, so that begun spools are used up', () => {
    const rigs = [
      rig({ rigId: 'full', benchOrder: 1 }),
      rig({ rigId: 'begun', benchOrder: 2, spoolLeftMm: 20_020 }),
      rig({ rigId: 'short', benchOrder: 3, spoolLeftMm: 20_019 }),
    ];
    expect(chooseGifts([LOT], rigs, spoken).gifts).toEqual([{ lotId: 'lot', rigId: 'begun' }]);
  });

  it('does not stay empty for a lot of another wire that is due sooner', () => {
    const lots = [lot({ lotId: 'other', priority: 1, wireId: 'BU' }), LOT];
    expect(chooseGifts(lots, [RIG], spoken).gifts).toEqual([{ lotId: 'lot', rigId: 'curlew' }]);
  });
});

describe('the reason of a waiting lot', () => {
  const reasons: [string, Partial<LotToGive>, Partial<RigToFill>[], string][] = [
    ['no rig with the wire', { wireId: 'BU', wireName: 'BU 30 AWG' }, [{}], 'No rig has BU 30 AWG loaded.'],
    ['no rig at all', {}, [], 'No rig has GN 30 AWG loaded.'],
    [
      'a rig that cuts, with the time rounded by whoever speaks it',
      {},
      [{ busy: { doing: 'cutting', freeAt: new Date('2026-12-01T14:20:00Z') } }],
      'Curlew has GN 30 AWG loaded but is cutting until about 14:20.',
    ],
    [
      'the rig that comes free first',
      {},
      [
        { busy: { doing: 'cutting', freeAt: hoursLater(2) } },
        { name: 'Knot', busy: { doing: 'cutting', freeAt: hoursLater(1) } },
        { name: 'Wren', busy: { doing: 'silent', freeAt: null } },
      ],
      'Knot has GN 30 AWG loaded but is cutting until about 13:00.',
    ],
    [
      'a full tray',
      {},
      [{ busy: { doing: 'tray full', freeAt: null } }],
      'Curlew has GN 30 AWG loaded but its tray is to be emptied first.',
    ],
    [
      'silence',
      {},
      [{ busy: { doing: 'silent', freeAt: null } }],
      'Curlew has GN 30 AWG loaded but is not heard.',
    ],
    [
      'a work hold',
      {},
      [{ busy: { doing: 'work hold', freeAt: null } }],
      'Curlew has GN 30 AWG loaded but somebody works on it.',
    ],
    [
      'a length over the profile',
      { lengthMm: 600 },
      [{}, { name: 'Knot', limits: { shortestPieceMm: 10, longestPieceMm: 599.5, trimMm: 20 } }],
      '600 mm is too long: Knot cuts at most 599.5 mm.',
    ],
    ['a length under the profile', { lengthMm: 5 }, [{}], '5 mm is too short: Curlew cuts at least 10 mm.'],
    ['no profile', {}, [{ limits: null }], 'Curlew has GN 30 AWG loaded but no profile yet.'],
    [
      'too little wire',
      {},
      [{ spoolLeftMm: 12_340 }],
      'Curlew has GN 30 AWG loaded, but 12.3 m are left and this lot needs 20.1 m.',
    ],
    [
      'a spool that lacks one mm',
      {},
      [{ spoolLeftMm: 20_019 }],
      'Curlew has GN 30 AWG loaded, but 20.0 m are left and this lot needs 20.1 m.',
    ],
  ];
  it.each(reasons)('says %s', (_why, lotChange, rigChanges, reason) => {
    const rigs = rigChanges.map((change, index) =>
      rig({ rigId: `rig ${index}`, benchOrder: index, ...change }),
    );
    const choice = chooseGifts([lot(lotChange)], rigs, spoken);
    expect(choice.gifts).toEqual([]);
    expect(choice.reasons.get('lot')).toBe(reason);
  });

  it('names the rig that another lot was given in the same moment', () => {
    const choice = chooseGifts([LOT, lot({ lotId: 'second', order: [1, 1, 2] })], [RIG], spoken);
    expect(choice.reasons.get('second')).toBe(
      'Curlew has GN 30 AWG loaded but has another lot to start first.',
    );
  });
});

describe('any choice', () => {
  const anyLot = fc.record({
    priority: fc.integer({ min: 1, max: 5 }),
    dueAt: fc.option(fc.integer({ min: 0, max: 9 }).map(hoursLater)),
    queuedAt: fc.integer({ min: 0, max: 3 }).map(hoursLater),
    wireId: fc.constantFrom('GN', 'BU', 'WH'),
    lengthMm: fc.integer({ min: 5, max: 600 }),
    pieces: fc.integer({ min: 1, max: 400 }),
  });
  const anyRig = fc.record({
    wireId: fc.constantFrom('GN', 'BU', null),
    spoolLeftMm: fc.integer({ min: 0, max: 100_000 }),
    limits: fc.constantFrom(null, RIG.limits),
    busy: fc.option(fc.record({ doing: fc.constantFrom(...BUSY_DOINGS), freeAt: fc.constant(null) })),
  });

  it('gives no lot twice and no rig two lots, gives only what fits, and has a reason for each that waits', () => {
    fc.assert(
      fc.property(
        fc.array(anyLot, { maxLength: 12 }),
        fc.array(anyRig, { maxLength: 8 }),
        (someLots, someRigs) => {
          const lots = someLots.map((change, i) => lot({ ...change, lotId: `lot ${i}`, order: [1, 1, i] }));
          const rigs = someRigs.map((change, i) => rig({ ...change, rigId: `rig ${i}`, benchOrder: i }));
          const { gifts, reasons } = chooseGifts(lots, rigs, spoken);
          expect(new Set(gifts.map(({ rigId }) => rigId)).size).toBe(gifts.length);
          expect(new Set(gifts.map(({ lotId }) => lotId)).size).toBe(gifts.length);
          expect(gifts.length + reasons.size).toBe(lots.length);
          for (const reason of reasons.values()) expect(reason).toMatch(/\.$/);
          for (const gift of gifts) {
            const given = lots.find(({ lotId }) => lotId === gift.lotId);
            const taker = rigs.find(({ rigId }) => rigId === gift.rigId);
            expect(given && taker && taker.busy === null && fits(given, taker)).toBe(true);
            // Nobody whose turn came first and who fits this rig was passed over.
            const passed = lots.filter((one) => reasons.has(one.lotId) && taker && fits(one, taker));
            for (const one of passed) expect(given && compareTurns(given, one)).toBeLessThan(0);
          }
        },
      ),
      { numRuns: 300 },
    );
  });
});
