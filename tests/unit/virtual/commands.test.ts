import { describe, expect, it } from 'vitest';
import { RigAtHand, preparedRig } from './rig-at-hand';

describe('a feed', () => {
  it('is refused while cold, and M114 moves on all the same', () => {
    const rig = new RigAtHand();
    expect(rig.run('G1 E25 F600')).toEqual(['echo: cold extrusion prevented', 'ok']);
    expect(rig.run('M114')[0]).toContain('E:25.00');
    rig.pass(60_000);
    expect(rig.core.mechanics.wire.pastJawsMm).toBe(0);
  });

  it.each([
    [200, 200],
    [201, 0],
  ])('of %d units feeds %d mm, and M114 shows it either way', (units, fedMm) => {
    const rig = new RigAtHand();
    const answers = rig.run('M302 P1').concat(rig.run(`G1 E${units} F6000`));
    expect(answers.includes('echo: too long extrusion prevented')).toBe(fedMm === 0);
    expect(rig.run('M114')[0]).toContain(`E:${units}.00`);
    rig.run('M400');
    expect(rig.core.mechanics.wire.pastJawsMm).toBeCloseTo(fedMm, 6);
  });

  it.each(['M302 P1', 'M302 S0'])('is allowed cold after %s, until a reset', (allow) => {
    const rig = new RigAtHand();
    rig.run(allow);
    expect(rig.run('G1 E5 F600')).toEqual(['ok']);
    rig.core.firmware.reset('button');
    rig.pass(1000);
    expect(rig.run('G1 E5')).toContain('echo: cold extrusion prevented');
  });

  it('with an absolute coordinate feeds once when it is sent twice', () => {
    const rig = preparedRig();
    rig.runAll('G92 E0', 'G1 E40 F3000', 'G1 E40 F3000', 'M400');
    expect(rig.core.mechanics.wire.pastJawsMm).toBeCloseTo(40, 2);
  });

  it('is relative after M83 and after G91, absolute after M82', () => {
    const rig = preparedRig();
    rig.runAll('M83', 'G1 E5 F3000', 'G1 E5', 'M82', 'G1 E12', 'M400');
    expect(rig.run('M114')[0]).toContain('E:12.00');
  });
});

describe('the register', () => {
  it.each([17, 123456, 420001, 999_999])('holds %d exactly, without motion, through a reopening', (value) => {
    const rig = preparedRig();
    rig.run('M400');
    expect(rig.run(`G92 Y${value} E0`)).toEqual([
      `X:0.00 Y:${value}.00 Z:-1.00 E:0.00 Count X:0 Y:0 Z:-100`,
      'ok',
    ]);
    rig.core.closePort();
    rig.core.openPort();
    rig.runAll('G1 E30 F3000', 'G1 Z-4', 'M400');
    expect(rig.run('M114')[0]).toBe(`X:0.00 Y:${value}.00 Z:-4.00 E:30.00 Count X:0 Y:0 Z:-400`);
    expect(rig.core.mechanics.positionMm.Y).toBe(0);
  });

  it('is gone after the port is opened on a board that resets', () => {
    const rig = new RigAtHand({ resetOnOpen: true });
    rig.run('G92 Y420001');
    rig.core.closePort();
    rig.core.openPort();
    rig.pass(1000);
    expect(rig.sent).toContain('start');
    expect(rig.run('M114')[0]).toContain('Y:0.00');
    expect(rig.tallied('reset').map((event) => event.cause)).toEqual(['power', 'port-opened', 'port-opened']);
  });
});

describe('the soft end stops', () => {
  it('clip a cut below zero without a word once the axis was homed', () => {
    const rig = new RigAtHand();
    rig.runAll('G28 Z', 'G1 Z-4 F1200', 'M400');
    expect(rig.run('M114')[0]).toContain('Z:0.00');
    expect(rig.tallied('closing')).toEqual([]);
  });

  it('clip by the place, not by the name that G92 gave it', () => {
    const rig = new RigAtHand();
    rig.runAll('G28 Z', 'G92 Z50', 'G1 Z46 F1200', 'M400');
    expect(rig.run('M114')[0]).toContain('Z:50.00');
  });

  it('are off after M211 S0, until a reset', () => {
    const rig = new RigAtHand();
    rig.runAll('M211 S0', 'G28 Z', 'G1 Z-4 F1200', 'M400');
    expect(rig.run('M114')[0]).toContain('Z:-4.00');
    rig.core.firmware.reset('button');
    rig.pass(1000);
    expect(rig.run('M211')[0]).toContain('Soft endstops: ON');
  });

  it('clip nothing on an axis that was never homed', () => {
    const rig = new RigAtHand();
    rig.runAll('G92 Z0', 'G1 Z-4 F1200', 'M400');
    expect(rig.run('M114')[0]).toContain('Z:-4.00');
  });
});

describe('the motors', () => {
  it('go limp after 120 s without a word, and M114 shows the old place', () => {
    const rig = new RigAtHand();
    rig.runAll('G1 Z-3 F1200', 'M400');
    rig.pass(119_999);
    expect(rig.core.mechanics.positionMm.Z).toBeCloseTo(-3, 6);
    const before = rig.sent.length;
    rig.pass(1);
    expect(rig.sent).toHaveLength(before);
    expect(rig.core.mechanics.positionMm.Z).toBe(-1);
    expect(rig.run('M114')[0]).toContain('Z:-3.00');
  });

  it('hold after M84 S0', () => {
    const rig = new RigAtHand();
    rig.runAll('M84 S0', 'G1 Z-3 F1200', 'M400');
    rig.pass(3_600_000);
    expect(rig.core.mechanics.positionMm.Z).toBeCloseTo(-3, 6);
  });

  it('let go at M84, after the motion before it', () => {
    const rig = new RigAtHand();
    rig.runAll('G1 Z-3 F1200', 'M84');
    expect(rig.tallied('steppers-off')).toHaveLength(1);
    expect(rig.core.mechanics.positionMm.Z).toBe(-1);
  });

  it('home onto the switch from wherever the axis truly is', () => {
    const rig = new RigAtHand({ mechanics: { startMm: { Z: 12 } } });
    expect(rig.run('G28 Z')).toEqual(['X:0.00 Y:0.00 Z:0.00 E:0.00 Count X:0 Y:0 Z:0', 'ok']);
    expect(rig.core.mechanics.positionMm.Z).toBeCloseTo(0, 9);
    expect(rig.tallied('homed').map((event) => event.axes)).toEqual([['Z']]);
  });

  it('without power never find the switch, and the board halts', () => {
    const rig = new RigAtHand({ mechanics: { startMm: { Z: 12 } } });
    rig.core.mechanics.setSupply(false);
    rig.put('G28 Z\n');
    rig.pass(10_000);
    expect(rig.sent).toEqual(['Error:Homing Failed', 'Error:Printer halted. kill() called!']);
  });

  it('stall at the end of the travel while the firmware counts on', () => {
    const rig = new RigAtHand();
    rig.runAll('G1 X-40 F6000', 'M400');
    expect(rig.run('M114')[0]).toContain('X:-40.00');
    expect(rig.core.mechanics.positionMm.X).toBe(-5);
    expect(rig.tallied('limit-exceeded').map((event) => event.axis)).toEqual(['X']);
  });
});

describe('answers', () => {
  it('name the main family, the virtual machine and the capabilities', () => {
    const answers = new RigAtHand({ firmware: { emergencyParser: false } }).run('M115');
    expect(answers[0]).toMatch(
      /^FIRMWARE_NAME:Marlin .* PROTOCOL_VERSION:1\.0 MACHINE_TYPE:Ellwand virtual rig /,
    );
    expect(answers).toContain('Cap:EMERGENCY_PARSER:0');
    expect(answers).toContain('Cap:RUNOUT:1');
  });

  it.each(['M0', 'M600', 'G99', 'g1 x5', 'HELLO'])('say that %s is unknown, and ok it', (line) => {
    expect(new RigAtHand().run(line)).toEqual([`echo:Unknown command: "${line}"`, 'ok']);
  });

  it('know no display, beeper or wire switch where none is fitted', () => {
    const rig = new RigAtHand({ firmware: { display: false, beeper: false, wireSwitch: false } });
    for (const line of ['M117 1234', 'M300 S880', 'M412 H1'])
      expect(rig.run(line)[0]).toMatch(/^echo:Unknown/);
  });

  it('come after the dwell', () => {
    const rig = new RigAtHand();
    const before = rig.core.nowMs;
    expect(rig.run('G4 P250')).toEqual(['ok']);
    expect(rig.core.nowMs - before).toBe(250);
  });
});
