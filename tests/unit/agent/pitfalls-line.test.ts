import { describe, expect, it } from 'vitest';
import { DIALECTS } from '@/agent/dialect/choose';
import type { Manner } from '@/agent/dialect/dialect';
import { marlin } from '@/agent/dialect/marlin';
import { repetier } from '@/agent/dialect/repetier';
import { readReply } from '@/agent/dialect/reply';
import { createConversation, type Answer } from '@/agent/link/conversation';
import { bareProfile, programFor } from './driven-rig';
import { HandClock, settle } from './hand-clock';
import { TestPort } from './test-port';
import { WireInHand } from './wire-in-hand';

const LINE = 'N28 G1 Z0 F600*8\n';
const ERROR = 'Error:checksum mismatch, Last Line: 27';
const OF_REPETIER: Manner = { numbered: true, numbersModulo: 65_536, acksOnReceipt: true };
const BARE: Manner = { numbered: false, numbersModulo: 2 ** 31, acksOnReceipt: false };

function ofRepetier(order: ConstructorParameters<typeof WireInHand>[0] = {}): WireInHand {
  return new WireInHand({ manner: OF_REPETIER, ...order }, (text) => repetier.read(text));
}

describe('pitfall: an ok', () => {
  it('that was doubled acknowledges no line that has an answer of its own', () => {
    const wire = new WireInHand({ command: 'M114', needs: 'position' }).hear('ok', 'ok');
    expect(wire.end).toBeUndefined();
    expect(wire.hear('X:0.00 Y:0.00 Z:0.00 E:0.00', 'ok').end).toEqual({ outcome: 'ok' });
    const heaters = new WireInHand({ command: 'M105', needs: 'temperature' }).hear('ok');
    expect(heaters.end).toBeUndefined();
    expect(heaters.hear('ok T:20.00 /0.00 @:0').end).toEqual({ outcome: 'ok' });
  });

  it('that came split over reads counts once it is whole, glued to text never', async () => {
    const port = new TestPort();
    const clock = new HandClock();
    const conversation = createConversation(port, clock, () => undefined);
    const answers: Answer[] = [];
    void conversation.ask('M400').then((answer) => answers.push(answer));
    for (const part of ['3680o', 'ok\n', 'N25 T:240.1 /0.0\n', 'X:1.0', '0 Yok\n', 'o']) port.say(part);
    await settle();
    expect(answers).toEqual([]);
    port.say('k\n');
    await settle();
    expect(answers).toMatchObject([{ outcome: 'ok' }]);
  });

  it('that was glued to text is found by asking: the line was taken and is never carried out twice', () => {
    const wire = new WireInHand().hear('3680ook').wait(4_000).wait(100);
    expect(wire.written).toEqual([LINE, '\n', LINE]);
    wire.hear('Error:Line Number is not Last Line Number+1, Last Line: 28', 'Resend: 29', 'ok').wait(75);
    expect(wire.end).toEqual({ outcome: 'taken' });
  });

  it('that was lost is asked for as soon as the board says that it waits, not before', () => {
    const wire = new WireInHand({ expectedMs: 60_000 }).wait(999).hear('wait');
    expect(wire.written).toEqual([LINE]);
    wire.wait(1).hear('wait').wait(100);
    expect(wire.written).toEqual([LINE, '\n', LINE]);
  });

  it.each([0, 1, 2])('comes %d times behind a Resend, and none of them acknowledges anything', (oks) => {
    const wire = new WireInHand().hear(ERROR, 'Resend: 28', ...Array<string>(oks).fill('ok')).wait(75);
    expect(wire.end).toBeUndefined();
    expect(wire.written).toEqual([LINE, LINE]);
    expect(wire.hear('ok').end).toEqual({ outcome: 'ok' });
  });

  it('that the board said twice for M999 is none of the next line’s', async () => {
    const port = new TestPort((line) =>
      line.includes('M999')
        ? 'Resend: 1\nok\nok\n'
        : line.includes('M114')
          ? 'X:0.00 Y:0.00 Z:0.00 E:0.00\nok\n'
          : 'ok\n',
    );
    const clock = new HandClock();
    const conversation = createConversation(port, clock, () => undefined);
    const revived = conversation.ask('M999', { line: 0 });
    await clock.pass(100);
    expect((await revived).outcome).toBe('taken');
    const asked = await conversation.ask('M114', { needs: 'position' });
    expect(asked.outcome === 'ok' && asked.replies.map(({ kind }) => kind)).toEqual(['position', 'ok']);
    expect(port.written.map((line) => line.replace(/\*.*/, '').trim())).toEqual(['N0 M999', 'N1 M114']);
  });
});

describe('pitfall: a Resend', () => {
  it('that is stale never has a taken line carried out again: the board refuses it by number', () => {
    const wire = new WireInHand().hear('Resend: 27', 'ok').wait(75);
    expect(wire.written).toEqual([LINE, LINE]);
    wire.hear('Error:Line Number is not Last Line Number+1, Last Line: 28', 'Resend: 29', 'ok').wait(75);
    expect(wire.end).toEqual({ outcome: 'taken' });
    expect(wire.written).toHaveLength(2);
  });

  it('for the next line never has this one sent again', () => {
    const wire = new WireInHand().hear('Resend: 29', 'ok').wait(10_000);
    expect(wire.end).toEqual({ outcome: 'taken' });
    expect(wire.written).toEqual([LINE]);
  });

  it.each(['Resend: 29', 'Resend: 1', 'Resend: 68'])(
    'with damaged digits, %s, is not believed against the error before it',
    (resend) => {
      const wire = new WireInHand().hear(ERROR, resend, 'ok').wait(75);
      expect(wire.end).toBeUndefined();
      expect(wire.written).toEqual([LINE, LINE]);
      expect(wire.hear('ok').end).toEqual({ outcome: 'ok' });
    },
  );

  it('that comes for ever, and never leaves it quiet, is bounded', () => {
    const wire = new WireInHand();
    while (!wire.end && wire.nowMs < 60_000) wire.hear(ERROR, 'Resend: 28', 'ok').wait(30);
    expect(wire.end).toEqual({ outcome: 'failed', failure: 'out-of-step' });
    expect(wire.nowMs).toBeLessThan(20_000);
    expect(wire.written.length).toBeLessThanOrEqual(7);
  });

  it('for a line that was never sent is given up after a bounded number of rounds', () => {
    const wire = new WireInHand();
    for (let round = 0; round < 7; round += 1) wire.hear('Resend: 12', 'ok').wait(75);
    expect(wire.end).toEqual({ outcome: 'failed', failure: 'out-of-step' });
  });
});

describe('pitfall: a board that', () => {
  it('is busy for minutes is waited for as long as it says so', () => {
    const wire = new WireInHand({ expectedMs: 1_000 });
    for (let minute = 0; minute < 10 * 30; minute += 1) wire.wait(2_000).hear('echo:busy: processing');
    expect(wire.written).toEqual([LINE]);
    expect(wire.hear('ok').end).toEqual({ outcome: 'ok' });
  });

  it('has no keepalive at all is given the longest move’s time', () => {
    const wire = new WireInHand({ expectedMs: 50_000 }).wait(52_999);
    expect(wire.written).toEqual([LINE]);
    expect(wire.hear('ok').end).toEqual({ outcome: 'ok' });
  });

  it('talks without an end is heard, but what is remembered of it is bounded, and its answer is not lost', () => {
    const wire = new WireInHand({ command: 'M114', needs: 'position' });
    for (let line = 0; line < 5_000; line += 1) wire.hear('echo: nothing of interest');
    expect(wire.exchange.replies).toHaveLength(64);
    expect(wire.hear('X:0.00 Y:0.00 Z:0.00 E:0.00', 'ok').end).toEqual({ outcome: 'ok' });
  });

  it.each([
    'start',
    'X:0.00 Y:17start',
    'echo:busy: procestart',
    'okstart',
    'Marlin 2.1.2',
    ' External Reset',
  ])('began anew in mid-run is known by %j, a line cut by the reset included', (text) => {
    expect(new WireInHand().hear(text).end).toEqual({ outcome: 'failed', failure: 'reset' });
  });

  it.each(['Fix the error and restart', '// action:start', 'starting', 'Error:cannot start'])(
    'only says %j did not begin anew',
    (text) => {
      expect(readReply(text).kind).not.toBe('start');
    },
  );
});

describe('pitfall: Repetier', () => {
  it('answers after its ok: the line is over when both were heard, in either order', () => {
    const position = 'X:0.00 Y:0.00 Z:0.000 E:0.0000';
    for (const lines of [
      ['ok 28', position],
      [position, 'ok 28'],
    ]) {
      const wire = ofRepetier({ command: 'M114', needs: 'position' }).hear(lines[0] ?? '');
      expect(wire.end).toBeUndefined();
      expect(wire.hear(lines[1] ?? '').end).toEqual({ outcome: 'ok' });
    }
  });

  it('skips a line that it has: never sent again, and the ok behind the skip is nobody’s', () => {
    const wire = ofRepetier().wait(4_000).wait(100);
    expect(wire.written).toHaveLength(3);
    wire.hear('skip 28', 'ok');
    expect(wire.end).toBeUndefined();
    wire.wait(75);
    expect(wire.end).toEqual({ outcome: 'taken' });
    expect(wire.written).toHaveLength(3);
  });

  it('skips what comes behind a Resend for another line: that is not taken', () => {
    const wire = ofRepetier().hear('Resend:26', 'ok').wait(75).hear('skip 28', 'ok');
    wire.wait(75);
    expect(wire.end).toBeUndefined();
    wire.wait(60_000);
    expect(wire.end).toEqual({ outcome: 'failed', failure: 'silent' });
  });

  it('skips a line of before without touching the one in flight', () => {
    const wire = ofRepetier().hear('skip 27', 'ok');
    expect(wire.end).toBeUndefined();
    expect(wire.hear('ok 28').end).toEqual({ outcome: 'ok' });
  });

  it.each([
    [65_535, 'ok 65535', { outcome: 'ok' }],
    [0, 'ok 65536', { outcome: 'ok' }],
    [0, 'ok 65535', undefined],
  ])('counts modulo 65536: line %d and %s', (line, text, end) => {
    expect(ofRepetier({ line }).hear(text).end).toEqual(end);
  });

  it('goes on with line 0 behind line 65535', async () => {
    const port = new TestPort((line) => `ok ${/^N(\d+)/.exec(line)?.[1] ?? ''}\n`);
    const conversation = createConversation(port, new HandClock(), () => undefined);
    conversation.speak(repetier);
    await conversation.ask('G90', { line: 65_535 });
    await conversation.ask('G90');
    expect(port.written.map((line) => line.slice(0, line.indexOf(' ')))).toEqual(['N65535', 'N0']);
  });

  it.each([
    ['busy:processing', 'busy'],
    ['wait', 'wait'],
    ['fatal:Heater/sensor error - restart with M999.', 'halted'],
    ['Unknown command:M412 H1', 'refusal'],
    ['T:20.00 /0 @:0', 'temperature'],
    ['Resend:12', 'resend'],
  ])('says %s: %s', (text, kind) => {
    expect(repetier.read(text).kind).toBe(kind);
  });

  it('tells its switches on one line', () => {
    expect(repetier.read('endstops hit: x_min:L x_max:H ')).toMatchObject({
      kind: 'switches',
      told: [
        { name: 'x_min', triggered: false },
        { name: 'x_max', triggered: true },
      ],
    });
  });

  it('proves the end of motion and the register by M114, and is not told what it does not know', () => {
    expect(repetier.linesOf('M400', null)).toEqual(['M400', 'M114']);
    expect(repetier.linesOf('G92 Y170001 E0', 'position')).toEqual(['G92 Y170001 E0', 'M114']);
    expect(repetier.linesOf('M114', 'position')).toEqual(['M114']);
    expect(repetier.linesOf('M211 S0', null)).toEqual([]);
    expect(marlin.linesOf('M211 S0', null)).toEqual(['M211 S0']);
  });
});

describe('pitfall: lines without numbers', () => {
  it('go out as they are', () => {
    expect(new WireInHand({ manner: BARE }).written).toEqual(['G1 Z0 F600\n']);
  });

  it('are never sent again: a lost ok fails the line', () => {
    const wire = new WireInHand({ manner: BARE }).wait(60_000);
    expect(wire.end).toEqual({ outcome: 'failed', failure: 'silent' });
    expect(wire.written).toHaveLength(1);
  });

  it('are never sent again: not when a Resend is heard, nor when the board waits', () => {
    const resent = new WireInHand({ manner: BARE }).hear('Resend: 28', 'ok');
    expect(resent.end).toEqual({ outcome: 'failed', failure: 'out-of-step' });
    const waited = new WireInHand({ manner: BARE, expectedMs: 60_000 }).wait(1_000).hear('wait');
    expect(waited.end).toEqual({ outcome: 'failed', failure: 'silent' });
    expect([resent.written.length, waited.written.length]).toEqual([1, 1]);
  });
});

describe('pitfall: a feed that is too long for one move', () => {
  it.each(DIALECTS.map((dialect) => [dialect.name, dialect] as const))(
    'is in no program: %s',
    (_name, dialect) => {
      const feed = { ...bareProfile.feed, feedPerMm: 1.3, longestMoveMm: 150 };
      const { program } = programFor({ ...bareProfile, feed }, { pieces: 1, lengthMm: 2_999 });
      const targets = (program.pieces[0] ?? []).flatMap((step) =>
        step.kind === 'feed' ? [step.feedTo] : [],
      );
      const moves = targets.map((target, index) => target - (targets[index - 1] ?? 0));
      expect(moves.length).toBeGreaterThan(20);
      expect(Math.max(...moves)).toBeLessThan(dialect.longestFeedUnits);
    },
  );
});
