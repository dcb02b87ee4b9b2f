import fc from 'fast-check';
import { profileFaults } from '@/lib/program/check-profile';
import { type Profile, profileSchema, type RunOrder } from '@/lib/program/profile';

const PARTS = 2 ** 30;

/** Even over the range and often at its ends; `fc.double` is even over exponents, and so nearly always next to 0. */
const real = (min: number, max: number) =>
  fc.integer({ min: 0, max: PARTS }).map((part) => min + ((max - min) * part) / PARTS);

/** As likely between 0.1 and 1 as between 100 and 1000. */
const scale = (min: number, max: number) =>
  real(Math.log(min), Math.log(max)).map((log) => Math.min(max, Math.max(min, Math.exp(log))));

type Axis = 'X' | 'Y' | 'Z';
const AXES: readonly Axis[] = ['X', 'Y', 'Z'];

/** Positions anywhere on the open side of the cut, which may be the lower or the upper end of the travel. */
const cutAxis = fc
  .record({
    axis: fc.constantFrom(...AXES),
    homing: fc.constantFrom<('endstop' | 'declared')[]>('endstop', 'declared'),
    fromMm: real(-900, 500),
    travelMm: scale(1, 400),
    closesUpwards: fc.boolean(),
    cutShare: real(0, 0.4),
    openShares: fc.tuple(real(0, 1), real(0, 1), real(0, 1)),
    speedMmS: scale(0.1, 1000),
    accelerationMmS2: scale(1, 100_000),
    stepsPerMm: scale(20, 100_000),
  })
  .map(({ fromMm, travelMm, closesUpwards, cutShare, openShares, ...rest }): Profile['cutAxis'] => {
    const at = (share: number) => fromMm + travelMm * (closesUpwards ? 1 - share : share);
    // A millimetre has three printed decimals; so have the places that a person types.
    const typed = (value: number) => Math.round(value * 1000) / 1000;
    const open = (share: number) => typed(at(cutShare + (1 - cutShare) * share));
    const [home, standby, park] = openShares;
    return {
      ...rest,
      homeMm: open(home),
      standbyMm: open(standby),
      cutMm: typed(at(cutShare)),
      parkMm: open(park),
      lowestMm: typed(fromMm) - 0.001,
      highestMm: typed(fromMm + travelMm) + 0.001,
    };
  });

/** Moves of the shortest piece, of the trim and of a lot's piece, so that a case is simulated in milliseconds. */
const MOVES_MOST = 20;

/** The longest piece may be of any number of moves; the shortest piece and the trim of `MOVES_MOST`. */
const feed = fc
  .record({
    feedPerMm: scale(0.1, 100),
    speedMmS: scale(1, 1000),
    accelerationMmS2: scale(1, 100_000),
    longestMoveMm: scale(1, 150),
    shortest: real(0, 1),
    longest: real(0, 1),
    trim: real(0, 1),
  })
  .map(({ shortest, longest, trim, ...rest }): Profile['feed'] => {
    const someMm = MOVES_MOST * moveMm(rest);
    const mostMm = Math.min(20_000, 100_000 / rest.feedPerMm);
    const between = (share: number, leastMm: number, limitMm: number) =>
      Math.min(limitMm, leastMm * (limitMm / leastMm) ** share);
    const shortestPieceMm = between(shortest, 1, Math.min(someMm, mostMm));
    return {
      ...rest,
      shortestPieceMm,
      longestPieceMm: between(longest, shortestPieceMm, mostMm),
      trimMm: between(trim, 0.5, Math.min(someMm, 1000)),
    };
  });

/** The longest move that the firmware and the profile take, mm of wire. */
function moveMm({ longestMoveMm, feedPerMm }: Pick<Profile['feed'], 'longestMoveMm' | 'feedPerMm'>): number {
  return Math.min(longestMoveMm, 150 / feedPerMm);
}

const fitted = fc.record({
  guardSwitch: fc.constantFrom<Profile['fitted']['guardSwitch'][]>(null, {
    endstop: 'x_max',
    closedReads: 'TRIGGERED',
  }),
  guardCutsMotorPower: fc.boolean(),
  hardwareStop: fc.boolean(),
  wireSwitch: fc.boolean(),
  display: fc.boolean(),
  beeper: fc.boolean(),
  heater: fc.boolean(),
  emergencyParser: fc.boolean(),
});

const serial = fc.record({
  baudRate: fc.constantFrom<Profile['serial']['baudRate'][]>(57600, 115200, 230400, 250000, 500000),
  resetsOnOpen: fc.boolean(),
});

/** Any profile that may be published: well formed, and without a fault that `profileFaults` knows. */
export const soundProfiles: fc.Arbitrary<Profile> = fc
  .record({
    cutAxis,
    feed,
    register: fc.constantFrom<('first' | 'second' | 'none')[]>('first', 'second', 'none'),
    steppersHoldS: fc.integer({ min: 10, max: 3600 }),
    fitted,
    serial,
  })
  .map(({ register, ...rest }): Profile => {
    const free = AXES.filter((axis) => axis !== rest.cutAxis.axis);
    const registerAxis = { first: free[0] ?? null, second: free[1] ?? null, none: null }[register];
    return { ...rest, registerAxis };
  })
  .filter((profile) => profileSchema.safeParse(profile).success && profileFaults(profile).length === 0);

/** A profile with a lot that it allows. */
export const lots: fc.Arbitrary<{ profile: Profile; order: RunOrder }> = soundProfiles.chain((profile) => {
  const { shortestPieceMm, longestPieceMm } = profile.feed;
  const longestMm = Math.min(longestPieceMm, MOVES_MOST * moveMm(profile.feed));
  const order = fc.record({
    tag: fc.integer({ min: 1, max: 99 }),
    pieces: fc.integer({ min: 1, max: 3 }),
    lengthMm: scale(shortestPieceMm, Math.max(shortestPieceMm, longestMm)),
  });
  return order.map((given) => ({ profile, order: given }));
});
