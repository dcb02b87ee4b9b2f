import { describe, expect, it } from 'vitest';
import { ALARM_PRIORITIES } from '@/lib/fleet/alarms';
import { foldRunEvent, type FoldedRun } from '@/lib/fleet/fold';
import { bareProfile, RUN } from './driven-rig';
import { LinkedRig } from './linked-rig';

const profile = { ...bareProfile, fitted: { ...bareProfile.fitted, heater: true } };

/** The priorities of the alarms that the server raises by what this agent has told it. */
function raisedBy(rig: LinkedRig): number[] {
  const at = '2026-12-01T08:00:00.000Z';
  const prepared: FoldedRun = {
    state: 'prepared',
    stateSince: at,
    holdReason: null,
    holdNote: '',
    doubtPiece: null,
    programHeldAt: null,
    startedAt: null,
    startedBy: null,
    endedAt: null,
    outcome: null,
  };
  let run = prepared;
  return rig.driven.entries.flatMap((entry) => {
    if (entry.type !== 'event' || !('runId' in entry.event.body)) return [];
    const folded = foldRunEvent(run, entry.event.body, at);
    run = folded.run;
    return folded.raise.map(({ kind }) => ALARM_PRIORITIES[kind]);
  });
}

describe.each(['marlin', 'repetier'] as const)('the heaters of a rig of the family %s', (family) => {
  const linked = () => new LinkedRig({ pieces: 200, profile, rig: { firmware: { family } } });

  async function running(): Promise<LinkedRig> {
    const rig = linked();
    await rig.start();
    await rig.until(() => rig.counted.length === 2);
    return rig;
  }

  it('are read as zero before a run: it is refused while a target stands', async () => {
    const rig = linked();
    rig.core.mechanics.heater.targetC = 60;
    await expect(rig.start()).rejects.toThrow('heater-on');
    rig.core.mechanics.heater.targetC = 0;
    await rig.until(() => rig.driven.state.signals.heater.reading === 'off');
    expect(rig.core.mechanics.heater.temperatureC).toBeLessThan(50);
    rig.goOn('start-run');
  });

  it('are read during a run', async () => {
    const rig = await running();
    const readings = rig.driven.sent.filter((line) => line === 'M105').length;
    await rig.until(() => rig.counted.length === 8);
    expect(rig.driven.sent.filter((line) => line === 'M105').length).toBeGreaterThan(readings);
    expect(rig.driven.state.signals.heater.reading).toBe('off');
  });

  it('end its motion and raise an urgent alarm when one rises well above where it was, however cold it is', async () => {
    const rig = await running();
    rig.control({ do: 'heater', warmsToC: 300 });
    await rig.stands();
    expect(rig.driven.run.hold).toBe('heater-warm');
    expect(rig.core.mechanics.heater.temperatureC).toBeLessThan(50);
    expect(rig.driven.interrupts).toEqual([]);
    expect(raisedBy(rig)).toEqual([1]);
    expect(() => rig.goOn()).toThrow('heater-on');
    expect(rig.counted).toHaveLength(rig.goodPieces);
  });

  it('are switched off at once with the motors when a target is above zero in a run, with an urgent alarm', async () => {
    const rig = await running();
    rig.core.mechanics.heater.targetC = 200;
    await rig.stands();
    expect(rig.driven.run.hold).toBe('heater-warm');
    expect(rig.driven.interrupts).toEqual(['M112']);
    await rig.until(() => rig.tally.some(({ kind }) => kind === 'killed'));
    expect(rig.core.mechanics.heater.targetC).toBe(0);
    expect(raisedBy(rig)).toEqual([1]);
  });

  it('are as urgent while the run is paused', async () => {
    const rig = await running();
    rig.driven.command({ kind: 'pause', ...rig.driven.envelope(), runId: RUN });
    await rig.until(() => rig.driven.run.mode === 'paused');
    rig.control({ do: 'heater', warmsToC: 300 });
    await rig.stands();
    expect(rig.driven.run.hold).toBe('heater-warm');
    expect(raisedBy(rig)).toEqual([1]);
  });

  it('that are not told any more end its motion', async () => {
    const rig = await running();
    rig.core.firmware.temperatureText = () => 'T:';
    await rig.stands();
    expect(rig.driven.run.hold).toBe('heater-warm');
    expect(rig.counted).toHaveLength(rig.goodPieces);
  });
});
