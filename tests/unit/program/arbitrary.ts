import fc from 'fast-check';
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

/** Four positions anywhere in the travel; cut and standby a tenth of a mm apart or more. */
const cutAxis = fc
  .record({
    lowestMm: real(-60, 10),
    travelMm: real(5, 250),
    at: fc.tuple(real(0, 1), real(0, 1), real(0, 1), real(0, 1)),
    speedMmS: real(0.5, 200),
    accelerationMmS2: real(5, 5000),
    homing: fc.constantFrom<('endstop' | 'declared')[]>('endstop', 'declared'),
  })
  .map(({ travelMm, at, ...rest }) => {
    const place = (share: number) => rest.lowestMm + Math.min(1, share) * travelMm;
    return {
      ...rest,
      highestMm: rest.lowestMm + travelMm,
      homeMm: place(at[0]),
      standbyMm: place(at[1]),
      cutMm: place(at[2]),
      parkMm: place(at[3]),
      stepsPerMm: 400,
    };
  })
  .filter(({ cutMm, standbyMm }) => Math.abs(cutMm - standbyMm) >= 0.1);

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
  .map(({ axes: [axis, registerAxis], cutAxis: cut, feed: feeding, wireSwitch }) =>
    profileSchema.parse({
      ...exampleProfile,
      cutAxis: { axis, ...cut },
      feed: feeding,
      registerAxis,
      fitted: { ...exampleProfile.fitted, wireSwitch },
    }),
  );

/** Any profile that the schema takes, with an order of a length that it allows. */
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
