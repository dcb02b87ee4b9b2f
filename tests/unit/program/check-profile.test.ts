import { describe, expect, it } from 'vitest';
import { DEMO_RIGS } from '@/db/seed/demo/rigs';
import { checkProgram } from '@/lib/program/check';
import { profileFaults } from '@/lib/program/check-profile';
import { generateProgram } from '@/lib/program/generate';
import type { Profile } from '@/lib/program/profile';
import { publishProfileSchema } from '@/lib/schemas/setup-rigs';
import { exampleOrder, exampleProfile } from './example';

const axis = (change: Partial<Profile['cutAxis']>): Profile => ({
  ...exampleProfile,
  cutAxis: { ...exampleProfile.cutAxis, ...change },
});
const feed = (change: Partial<Profile['feed']>): Profile => ({
  ...exampleProfile,
  feed: { ...exampleProfile.feed, ...change },
});

const faultsOf = (profile: Profile) => profileFaults(profile).map(({ path }) => path.join('.'));

describe('a profile', () => {
  it.each(DEMO_RIGS.map(({ name, profile }) => [name, profile] as const))(
    'of the demo is sound: %s',
    (_name, profile) => expect(profileFaults(profile)).toEqual([]),
  );

  // The cut of the example is at -1.5 and its standby above it; steps are a 400th of a mm.
  it.each<[string, Profile, string[]]>([
    ['parks 0.1 mm off the cut', axis({ parkMm: -1.4 }), []],
    ['parks nearer than that', axis({ parkMm: -1.401 }), ['cutAxis.parkMm']],
    ['parks beyond the cut, so that parking shuts the jaws', axis({ parkMm: -2 }), ['cutAxis.parkMm']],
    ['homes beyond the cut', axis({ homeMm: -2 }), ['cutAxis.homeMm']],
    ['cuts 10 steps from standby', axis({ stepsPerMm: 20, standbyMm: -1 }), []],
    ['cuts 9.8 steps from standby', axis({ stepsPerMm: 20, standbyMm: -1.01 }), ['cutAxis.cutMm']],
    ['has steps that are too coarse', axis({ stepsPerMm: 19 }), ['cutAxis.stepsPerMm']],
    ['feeds 100,000 units for a piece', feed({ feedPerMm: 5, longestPieceMm: 20_000 }), []],
    ['feeds more', feed({ feedPerMm: 5.01, longestPieceMm: 20_000 }), ['feed.longestPieceMm']],
    ['has a feed that the rig’s answer does not show', feed({ feedPerMm: 0.099 }), ['feed.feedPerMm']],
    ['has a piece shorter than 1 mm', feed({ shortestPieceMm: 0.9 }), ['feed.shortestPieceMm']],
  ])('that %s', (_what, profile, faults) => expect(faultsOf(profile)).toEqual(faults));

  it('with a fault is not published, and the field is named', () => {
    const rigId = '00000000-0000-4000-8000-000000000010';
    const parsed = publishProfileSchema.safeParse({
      rigId,
      profile: axis({ parkMm: -2 }),
      reason: 'moved',
    });
    expect(parsed.error?.issues.map(({ path }) => path.join('.'))).toEqual(['profile.cutAxis.parkMm']);
  });

  it('with a fault, kept from earlier, sends no program', () => {
    const profile = axis({ parkMm: -2 });
    const problems = checkProgram(generateProgram(profile, exampleOrder).text, profile, exampleOrder);
    expect(problems).toMatchObject([{ lineNumber: 1, message: expect.stringContaining('parkMm') as string }]);
  });
});
