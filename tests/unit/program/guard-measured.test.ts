import { describe, expect, it } from 'vitest';
import { guardDelayS } from '@/lib/program/guard';
import type { Profile } from '@/lib/program/profile';
import { bareProfile } from '@/tests/unit/agent/driven-rig';
import { LinkedRig } from '@/tests/unit/agent/linked-rig';
import { rigOfProfile } from '@/tests/unit/fuzz/rig-of-profile';

const PIECES = 5;
/** Moments of opening, spread over the whole run. */
const MOMENTS = 18;

function profileWith(change: Partial<Profile['fitted']>): Profile {
  const guardSwitch = { endstop: 'x_max', closedReads: 'TRIGGERED' as const };
  // Home is the upper end of the travel, so that homing from the lower end takes as long as it can.
  const cutAxis = { ...bareProfile.cutAxis, homeMm: 12, highestMm: 12 };
  return { ...bareProfile, cutAxis, fitted: { ...bareProfile.fitted, guardSwitch, ...change } };
}

/** The agent at a rig that homes as slowly as the slowest, from the far end of its travel. */
async function started(profile: Profile, lengthMm: number): Promise<LinkedRig> {
  const { axis, lowestMm } = profile.cutAxis;
  const input = rigOfProfile(profile);
  const rig = new LinkedRig({
    pieces: PIECES,
    lengthMm,
    profile,
    rig: {
      ...input,
      firmware: { ...input.firmware, homingSpeedMmS: 2 },
      mechanics: { ...input.mechanics, startMm: { [axis]: lowestMm } },
    },
  });
  await rig.start();
  return rig;
}

/** How long an unhindered run takes, ms. */
async function runMs(profile: Profile, lengthMm: number): Promise<number> {
  const rig = await started(profile, lengthMm);
  const beganMs = rig.core.nowMs;
  await rig.stands();
  return rig.core.nowMs - beganMs;
}

/** Opens the guard at a moment of a run. @returns seconds to the end of the last motion, and what moved meanwhile. */
async function opened(profile: Profile, lengthMm: number, atMs: number) {
  const rig = await started(profile, lengthMm);
  await rig.pass(atMs);
  rig.control({ do: 'guard', open: true });
  const openedMs = rig.core.nowMs;
  const from = rig.tally.length;
  await rig.stands();
  await rig.pass(60_000);
  const { idle, lastMotionMs } = rig.core.firmware.stepper;
  const after = rig.tally
    .slice(from)
    .filter(({ kind }) => kind === 'motion-guard-open' || kind === 'closing');
  return { idle, lastS: Math.max(0, lastMotionMs - openedMs) / 1000, after, hold: rig.driven.run.hold };
}

async function overTheRun(profile: Profile, lengthMm: number) {
  const wholeMs = await runMs(profile, lengthMm);
  const moments = Array.from({ length: MOMENTS }, (_, index) => (wholeMs * (index + 0.5)) / MOMENTS);
  const found = [];
  for (const atMs of moments) found.push(await opened(profile, lengthMm, atMs));
  return found;
}

describe.each([20, 700])('a guard that is opened at any moment of a run with pieces of %d mm', (lengthMm) => {
  it.each([
    ['only tells, and the firmware acts on M112 at once', true],
    ['only tells, and the firmware does not', false],
  ])('and %s: nothing moves later than is stated, and the run is held', async (_what, emergencyParser) => {
    const profile = profileWith({ guardCutsMotorPower: false, emergencyParser });
    const statedS = guardDelayS(profile, lengthMm) ?? 0;
    const found = await overTheRun(profile, lengthMm);
    const worstS = Math.max(...found.map(({ lastS }) => lastS));
    expect(found.every(({ idle }) => idle)).toBe(true);
    expect(worstS).toBeLessThanOrEqual(statedS);
    // What is stated is no fright: it is not twice what is measured.
    expect(worstS).toBeGreaterThan(0.5 * statedS);
    expect(found.filter(({ hold }) => hold === 'guard-open').length).toBeGreaterThan(MOMENTS / 2);
    expect(found.some(({ after }) => after.length > 0)).toBe(true);
  });

  it('and cuts motor power: nothing moves any more', async () => {
    const found = await overTheRun(profileWith({ guardCutsMotorPower: true }), lengthMm);
    expect(found.map(({ after }) => after).filter((after) => after.length > 0)).toEqual([]);
  });
});
