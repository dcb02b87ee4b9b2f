import { afterEach, describe, expect, it } from 'vitest';
import type { Profile } from '@/lib/program/profile';
import { AgentBench, benchProfile } from '../support/agent-bench';

const LENGTH_MM = 40;
const PIECES = 6;

let bench: AgentBench | null = null;

afterEach(async () => {
  await bench?.close();
  bench = null;
});

/** Repetier watches no wire switch. */
const profile: Profile = { ...benchProfile, fitted: { ...benchProfile.fitted, wireSwitch: false } };

function goodClosings(at: AgentBench): number {
  return at.closings().filter(({ wireMm, severed }) => severed && Math.abs(wireMm - LENGTH_MM) <= 0.05)
    .length;
}

async function cutting(given: Profile, family: 'marlin' | 'repetier'): Promise<AgentBench> {
  const at = await AgentBench.open({ profile: given, rig: { firmware: { family } } });
  bench = at;
  at.startAgent();
  await at.start(at.makeRun({ lengthMm: LENGTH_MM, pieces: PIECES }));
  return at;
}

async function ended(at: AgentBench): Promise<void> {
  await at.until(({ runner }) => runner === 'tray-full', 'the run ends', 50_000);
  const said = await at.told('piece-cut', PIECES);
  expect(said.map(({ piece }) => piece)).toEqual([1, 2, 3, 4, 5, 6]);
  expect(goodClosings(at)).toBe(PIECES);
}

describe('an agent at a real port', () => {
  it('finds that the firmware is Repetier, and cuts every piece once over lost and doubled oks', async () => {
    const at = await cutting(profile, 'repetier');
    expect(at.report().firmware?.dialect).toBe('Repetier');
    await at.rig.control({ do: 'ok', fault: 'swallow', count: 2 });
    await at.told('piece-cut', 1);
    await at.rig.control({ do: 'ok', fault: 'double', count: 4 });
    await ended(at);
  });

  it('sends lines without numbers when the profile says so, and holds when an ok is lost', async () => {
    const bare: Profile = { ...profile, serial: { ...profile.serial, unnumbered: true } };
    const at = await cutting(bare, 'marlin');
    await at.told('piece-cut', 1);
    await at.rig.control({ do: 'ok', fault: 'swallow', count: 1 });
    await at.until(({ holdReason }) => holdReason === 'link-lost', 'the run is held');
    expect(at.rig.snapshot().lastNumber).toBe(0);
    const [run] = [...at.desk.programs.values()];
    if (!run) throw new Error('no run');
    await at.goOn(run);
    await ended(at);
    expect(at.desk.said('piece-doubted')).toEqual([]);
  });
});
