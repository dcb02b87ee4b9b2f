import { describe, expect, it } from 'vitest';
import { control } from '@/agent/virtual/core/controls';
import { RigAtHand, preparedRig } from './rig-at-hand';

describe('the guard', () => {
  it.each([
    ['x_max', 'TRIGGERED', 'open'],
    ['y_max', 'open', 'TRIGGERED'],
  ] as const)('on %s that reads %s when closed is told by M119', (guardSwitch, closed, open) => {
    const rig = new RigAtHand({ firmware: { guardSwitch, guardClosedReads: closed } });
    expect(rig.run('M119')).toContain(`${guardSwitch}: ${closed}`);
    control(rig.core, { do: 'guard', open: true });
    expect(rig.run('M119')).toContain(`${guardSwitch}: ${open}`);
  });

  it('that is not fitted has no line', () => {
    const rig = new RigAtHand({ firmware: { guardSwitch: null, wireSwitch: false } });
    expect(rig.run('M119')).toEqual([
      'Reporting endstop status',
      'x_min: TRIGGERED',
      'y_min: TRIGGERED',
      'z_min: TRIGGERED',
      'ok',
    ]);
  });

  it('puts every motion under it into the tally while it is open, once a move', () => {
    const rig = preparedRig();
    control(rig.core, { do: 'guard', open: true });
    rig.run('G1 X50 F600');
    for (let step = 0; step < 100; step += 1) rig.pass(10);
    rig.runAll('G1 E10', 'G1 Z-4', 'M400');
    expect(rig.tallied('motion-guard-open').map((event) => event.axes)).toEqual([['X'], ['E'], ['Z']]);
    expect(rig.tallied('closing').map((closing) => closing.guardOpen)).toEqual([true]);
  });

  it('opened during a move tells that move', () => {
    const rig = preparedRig();
    rig.run('G1 X50 F600');
    rig.pass(1000);
    control(rig.core, { do: 'guard', open: true });
    rig.run('M400');
    const [motion] = rig.tallied('motion-guard-open');
    const [opened] = rig.tallied('guard');
    expect(motion?.atMs).toBeCloseTo(opened?.atMs ?? 0, 6);
  });

  it('wired into the motor supply stops motion at once, while the logic goes on', () => {
    const rig = preparedRig({ mechanics: { guardCutsMotorPower: true } });
    rig.run('G1 X50 F600');
    rig.pass(1005);
    const atMm = rig.core.mechanics.positionMm.X;
    control(rig.core, { do: 'guard', open: true });
    rig.runAll('M400', 'G1 Z-4 F1200', 'M400');
    expect(rig.core.mechanics.positionMm.X).toBe(atMm);
    expect(rig.run('M114')[0]).toMatch(/^X:50\.00 .*Z:-4\.00 .* Count X:4000 Y:0 Z:-400$/);
    expect(rig.tallied('motion-guard-open')).toEqual([]);
    expect(rig.tallied('closing')).toEqual([]);
    expect(rig.tallied('motor-power').map(({ on, cause }) => [on, cause])).toEqual([[false, 'guard']]);
  });
});

describe('the wire switch', () => {
  it('reads TRIGGERED while wire is there', () => {
    const rig = new RigAtHand();
    expect(rig.run('M119')).toContain('filament: TRIGGERED');
    control(rig.core, { do: 'wire', out: true });
    expect(rig.run('M119')).toContain('filament: open');
    control(rig.core, { do: 'spool', mm: 500 });
    expect(rig.run('M119')).toContain('filament: TRIGGERED');
  });

  it('is watched only while the job timer runs, told once, and left to the sender after M412 H1', () => {
    const rig = new RigAtHand();
    rig.run('M412 H1');
    control(rig.core, { do: 'wire', out: true });
    rig.pass(100);
    expect(rig.sent).toEqual(['ok']);
    rig.run('M75');
    rig.pass(5000);
    expect(rig.sent).toEqual(['ok', 'ok', '//action:filament_runout T0']);
    rig.run('M77');
    rig.pass(5000);
    expect(rig.sent).toHaveLength(4);
  });
});

describe('the heater', () => {
  it('warms to its target, and M109 waits for it', () => {
    const rig = new RigAtHand();
    rig.run('M109 S60');
    expect(rig.core.mechanics.heater.temperatureC).toBeGreaterThan(57);
    expect(rig.run('M105')[0]).toMatch(/^ok T:5[89]\.\d\d \/60\.00 @:127$/);
  });

  it('that warms by fault shows it with a target of 0', () => {
    const rig = new RigAtHand();
    control(rig.core, { do: 'heater', warmsToC: 90 });
    rig.pass(60_000);
    expect(rig.run('M105')[0]).toMatch(/^ok T:80\.\d\d \/0\.00 @:0$/);
  });

  it('reports by itself with a leading blank, which is no ok', () => {
    const rig = new RigAtHand();
    rig.run('M155 S2');
    rig.sent.length = 0;
    rig.pass(4000);
    expect(rig.sent).toEqual([' T:20.00 /0.00 @:0', ' T:20.00 /0.00 @:0']);
  });
});
