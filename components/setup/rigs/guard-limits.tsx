import { guardDelayS, guardWords } from '@/lib/program/guard';
import type { Profile } from '@/lib/program/profile';

/** What the guard of the published profile does when it is not wired, said where that is set. */
export function GuardLimits({ profile }: { profile: Profile }) {
  const unwired = { ...profile, fitted: { ...profile.fitted, guardCutsMotorPower: false } };
  return (
    <p className="col-span-full max-w-prose">
      Tick “cuts motor power” only where it is wired so, and tried. Not wired, with pieces of{' '}
      {profile.feed.longestPieceMm} mm: {guardWords(guardDelayS(unwired))}{' '}
      <span className="text-soft">
        Reckoned from the profile as published, for a cable that works. Whether it is enough, your local rules
        and a qualified person say.
      </span>
    </p>
  );
}
