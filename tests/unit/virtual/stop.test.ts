import { describe, expect, it } from 'vitest';
import { control } from '@/agent/virtual/core/controls';
import { RigAtHand, preparedRig } from './rig-at-hand';

const HALTED = 'Error:Printer halted. kill() called!';

describe('M112', () => {
  it('is seen at once by the emergency parser, behind a full queue', () => {
    const rig = preparedRig();
    for (let sent = 0; sent < 30; sent += 1) rig.put('G4 P5000\n');
    expect(rig.put('M112\n')).toEqual([HALTED]);
    expect(rig.core.firmware.state).toBe('halted');
  });

  it('waits for its turn without the emergency parser', () => {
    const rig = preparedRig({ firmware: { emergencyParser: false } });
    for (let sent = 0; sent < 4; sent += 1) rig.put('G4 P1000\n');
    expect(rig.put('M112\n')).toEqual([]);
    rig.pass(999);
    expect(rig.core.firmware.state).toBe('running');
    rig.pass(1);
    expect(rig.sent.at(-1)).toBe(HALTED);
  });

  it('stops in mid-move, drops the axis, and nothing but a reset revives the board', () => {
    const rig = preparedRig();
    rig.run('G1 Z-3.5 F60');
    rig.pass(500);
    rig.put('M112\n');
    expect(rig.core.mechanics.positionMm.Z).toBe(-1);
    expect(rig.put('M999\nM105\n')).toEqual([]);
    rig.pass(60_000);
    expect(rig.tallied('closing')).toEqual([]);
    rig.core.firmware.reset('button');
    rig.pass(1000);
    expect(rig.run('M105')).toEqual(['ok T:20.00 /0.00 @:0']);
  });

  it('is not seen within a longer word', () => {
    const rig = new RigAtHand();
    rig.run('M117 M112');
    rig.run('M1125');
    expect(rig.core.firmware.state).toBe('running');
  });
});

describe('M410', () => {
  it('ends motion without a ramp, takes its place from the steps, and rests for a second', () => {
    const rig = new RigAtHand();
    rig.run('G1 X100 F3000');
    rig.pass(1025);
    const stopped = rig.run('M410');
    expect(stopped).toEqual(['ok']);
    const before = rig.core.nowMs;
    expect(rig.run('M114')[0]).toBe('X:50.00 Y:0.00 Z:0.00 E:0.00 Count X:4000 Y:0 Z:0');
    expect(rig.core.nowMs - before).toBeLessThanOrEqual(1000);
  });
});

describe('a stop on an error of its own', () => {
  it('refuses motion until M999, which answers two oks', () => {
    const rig = new RigAtHand();
    control(rig.core, { do: 'error-stop' });
    expect(rig.sent.at(-1)).toMatch(/^Error:Printer stopped due to errors\..*M999/);
    rig.run('G1 X10 F6000');
    expect(rig.run('M114')[0]).toMatch(/^X:0\.00/);
    expect(rig.run('M999')).toEqual(['Resend: 1', 'ok', 'ok']);
    rig.run('G1 X10 F6000');
    expect(rig.run('M114')[0]).toMatch(/^X:10\.00/);
  });
});
