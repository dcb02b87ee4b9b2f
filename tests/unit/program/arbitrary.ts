import fc from 'fast-check';
import { profileFaults } from '@/lib/program/check-profile';
import { type Profile, profileSchema, type RunOrder } from '@/lib/program/profile';
import { exampleProfile } from './example';

const real = (min: number, max: number) => fc.double({ min, max, noNaN: true, noDefaultInfinity: true });

type Axis = 'X' | 'Y' | 'Z';
const axes: fc.Arbitrary<[Axis, Axis | null]> = fc.constantFrom<[Axis, Axis | null][]>(
  ['Z', 'Y'],
  ['Z', 'X'],
  ['X', 'Y'],
  ['Y', 'Z'],
  ['Z', null],
  ['X', null],
);

/** Shares of a way, even over it; `fc.double` is even over exponents, and so nearly always next to 0. */
const share = fc.integer({ min: 0, max: 1_000_000 }).map((millionths) => millionths / 1_000_000);

/** Home, standby and park anywhere on one side of the cut, a tenth of a mm from it or more. */
const cutAxis = fc
  .record({
    lowestMm: real(-60, 10),
    travelMm: real(5, 250),
    closesUpwards: fc.boolean(),
    cutAt: share.map((of) => of * 0.4),
    at: fc.tuple(share, share, share),
    speedMmS: real(0.5, 200),
    accelerationMmS2: real(5, 5000),
    homing: fc.constantFrom<('endstop' | 'declared')[]>('endstop', 'declared'),
  })
  .map(({ travelMm, closesUpwards, cutAt, at, ...rest }) => {
    const place = (of: number) => rest.lowestMm + travelMm * (closesUpwards ? 1 - of : of);
    const open = (of: number) => place(Math.min(1, cutAt + 0.1 / travelMm + of * (1 - cutAt)));
    return {
      ...rest,
      highestMm: rest.lowestMm + travelMm,
      homeMm: open(at[0]),
      standbyMm: open(at[1]),
      cutMm: place(cutAt),
      parkMm: open(at[2]),
      stepsPerMm: 400,
    };
  });

const feed = fc
  .record({
    feedPerMm: real(0.1, 10),
    speedMmS: real(1, 300),
    accelerationMmS2: real(10, 5000),
    longestMoveMm: real(5, 150),
    shortestPieceMm: real(1, 100),
    spanMm: real(0, 1500),
    trimMm: real(0.5, 60),
  })
  .map(({ spanMm, ...rest }) => ({ ...rest, longestPieceMm: rest.shortestPieceMm + spanMm }));

const profiles: fc.Arbitrary<Profile> = fc
  .record({ axes, cutAxis, feed, wireSwitch: fc.boolean() })
  .map(({ axes: [axis, registerAxis], cutAxis: cut, feed: feeding, wireSwitch }) => ({
    ...exampleProfile,
    cutAxis: { axis, ...cut },
    feed: feeding,
    registerAxis,
    fitted: { ...exampleProfile.fitted, wireSwitch },
  }))
  .filter((profile) => profileSchema.safeParse(profile).success && profileFaults(profile).length === 0);

/** Any profile that may be published, with an order of a length that it allows. */
export const profilesWithOrders: fc.Arbitrary<{ profile: Profile; order: RunOrder }> = profiles.chain(
  (profile) =>
    fc
      .record({
        tag: fc.integer({ min: 1, max: 99 }),
        pieces: fc.integer({ min: 1, max: 5 }),
        lengthMm: real(profile.feed.shortestPieceMm, profile.feed.longestPieceMm),
      })
      .map((order) => ({ profile, order })),
);
