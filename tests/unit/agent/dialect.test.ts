import { describe, expect, it } from 'vitest';
import { identify, refusalOfStranger } from '@/agent/dialect/identity';
import { readPosition } from '@/agent/dialect/position';
import { readReply } from '@/agent/dialect/reply';
import { readTemperature } from '@/agent/dialect/temperature';

describe('a received line', () => {
  // The lines are those of the protocol page, section 2.
  it.each([
    ['ok', { kind: 'ok', line: null, temperature: null }],
    ['ok N21 P0 B3', { kind: 'ok', line: 21, temperature: null }],
    ['ok T:19.37 /0.00 @:0', { kind: 'ok', temperature: { actualC: 19.37, targetC: 0 } }],
    [' T:19.37 /0.00 B:61.00 /60.00 @:0', { kind: 'temperature', temperature: { actualC: 61, targetC: 60 } }],
    ['Resend: 28', { kind: 'resend', line: 28 }],
    ['Resend:3', { kind: 'resend', line: 3 }],
    ['rs N12', { kind: 'resend', line: 12 }],
    ['Error:checksum mismatch, Last Line: 27', { kind: 'error' }],
    ['Error:Printer halted. kill() called!', { kind: 'halted' }],
    ['Error:Printer stopped due to errors. Fix the error and use M999 to restart.', { kind: 'halted' }],
    ['start', { kind: 'start' }],
    ['wait', { kind: 'wait' }],
    ['echo:busy: processing', { kind: 'busy' }],
    ['echo:busy: paused for user', { kind: 'busy' }],
    ['echo: cold extrusion prevented', { kind: 'refusal', refusal: 'cold' }],
    ['echo: too long extrusion prevented', { kind: 'refusal', refusal: 'long' }],
    ['echo:Unknown command: "C1 Z0 B600"', { kind: 'refusal', refusal: 'unknown' }],
    ['echo:Invalid value', { kind: 'refusal', refusal: 'invalid' }],
    ['Reporting endstop status', { kind: 'switches' }],
    ['z_min: open', { kind: 'switch', name: 'z_min', triggered: false }],
    ['filament: TRIGGERED', { kind: 'switch', name: 'filament', triggered: true }],
    ['//action:pause', { kind: 'action', action: 'pause' }],
    ['// action:filament_runout T0', { kind: 'action', action: 'filament_runout T0' }],
    ['echo:endstops hit:  Z:4.19', { kind: 'switch-hit' }],
    ['Cap:EMERGENCY_PARSER:1', { kind: 'capability', name: 'EMERGENCY_PARSER', has: true }],
  ])('%s is read by its beginning', (text, expected) => {
    expect(readReply(text)).toMatchObject({ text, ...expected });
  });

  it.each(['3680ook', 'okay', 'okN25', 'N25 T:240', 'Resend: 2x', 'X:0.00 Y:17.00 Z:0', 'starting'])(
    '%s, glued or cut, acknowledges and reports nothing',
    (text) => {
      expect(['ok', 'resend', 'position', 'temperature', 'start']).not.toContain(readReply(text).kind);
    },
  );
});

describe('a position report', () => {
  it('gives coordinates and steps', () => {
    expect(readPosition('X:0.00 Y:170002.00 Z:-1.50 E:25.00 Count X:0 Y:0 Z:-400')).toEqual({
      X: 0,
      Y: 170002,
      Z: -1.5,
      E: 25,
      count: { X: 0, Y: 0, Z: -400 },
    });
    expect(readPosition('X:0.00 Y:0.00 Z:0.00 E:0.00')?.count).toBeNull();
  });

  it('is none when a byte is missing or too many', () => {
    const line = 'X:0.00 Y:170002.00 Z:-1.50 E:25.00 Count X:0 Y:0 Z:-400';
    expect(readPosition(`${line}ok`)).toBeNull();
    expect(readPosition(line.slice(1))).toBeNull();
    for (let length = 0; length < line.indexOf(' Count'); length += 1) {
      const cut = readPosition(line.slice(0, length));
      // A cut within the last number still looks whole: the step count that is missing then tells.
      if (cut) expect(cut.count).toBeNull();
    }
  });
});

describe('a temperature report', () => {
  it('takes the hottest of all heaters, and none where none is told', () => {
    expect(readTemperature('ok T:20.1 /0.0 B:80.5 /0.0 @:0 B@:0')).toEqual({ actualC: 80.5, targetC: 0 });
    expect(readTemperature('ok')).toBeNull();
  });
});

describe('the firmware’s name', () => {
  it('is taken of the Marlin family and its forks, with what it can', () => {
    const line =
      'FIRMWARE_NAME:Marlin 2.1.2 (Jan 1 2026) SOURCE_CODE_URL:github.com/x PROTOCOL_VERSION:1.0 ' +
      'MACHINE_TYPE:Ellwand virtual rig EXTRUDER_COUNT:1 UUID:cede2a2f';
    expect(identify(line, { EMERGENCY_PARSER: true })).toEqual({
      known: true,
      firmware: {
        name: 'Marlin 2.1.2 (Jan 1 2026)',
        machineType: 'Ellwand virtual rig',
        virtual: true,
        dialect: 'main family',
        capabilities: { EMERGENCY_PARSER: true },
      },
    });
    expect(identify('FIRMWARE_NAME:Prusa-Firmware 3.14 based on Marlin', {}).known).toBe(true);
    const real = identify('FIRMWARE_NAME:Marlin 2.1 MACHINE_TYPE:3D Printer', {});
    expect(real.known && real.firmware.virtual).toBe(false);
  });

  it('is taken of Repetier, whatever else its line names, and of a fork by its banner', () => {
    const line = 'FIRMWARE_NAME:Repetier_1.0.4 FIRMWARE_URL:https://x/marlin-fork PROTOCOL_VERSION:1.0';
    expect(identify(line, {})).toMatchObject({ known: true, firmware: { dialect: 'Repetier' } });
    expect(identify('FIRMWARE_NAME:Of my own 2', {}).known).toBe(false);
    expect(identify('FIRMWARE_NAME:Of my own 2', {}, true)).toMatchObject({
      known: true,
      firmware: { dialect: 'main family' },
    });
  });

  it.each([
    ['FIRMWARE_NAME: RepRapFirmware for Duet 2', 'RepRapFirmware'],
    ['FIRMWARE_NAME:Smoothieware, FIRMWARE_URL:x', 'Smoothieware'],
    ['FIRMWARE_NAME:Klipper', 'binary MCU'],
    ['FIRMWARE_NAME:Something Else', 'Something Else'],
  ])('%s is told apart and refused with the reason', (line, reason) => {
    const identity = identify(line, {});
    expect(identity.known).toBe(false);
    expect(!identity.known && identity.reason).toContain(reason);
  });

  it('is not waited for where something else speaks', () => {
    expect(refusalOfStranger("Grbl 1.1h ['$' for help]")).toContain('grbl');
    expect(refusalOfStranger('error:20')).toContain('grbl');
    expect(refusalOfStranger('Smoothie')).toContain('Smoothieware');
    expect(refusalOfStranger('\x00\x8f\xf1~\x02')).toContain('Not a G-code port');
    expect(refusalOfStranger('Marlin 2.1.2')).toBeNull();
  });
});
