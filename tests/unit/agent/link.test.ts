import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Clock } from '@/agent/clock';
import { createConversation } from '@/agent/link/conversation';
import { createEar, greet } from '@/agent/link/greet';
import { createSplitter } from '@/agent/link/splitter';
import { HandClock } from './hand-clock';
import { TestPort } from './test-port';

describe('the line splitter', () => {
  it('gives the same lines however the text is cut', () => {
    const text = 'start\r\necho:busy: processing\nok N1 P15 B3\n\nX:1.00 Y:2.00 Z:3.00 E:4.00\r\nok\n';
    const whole = createSplitter().push(text);
    expect(whole).toEqual([
      'start',
      'echo:busy: processing',
      'ok N1 P15 B3',
      'X:1.00 Y:2.00 Z:3.00 E:4.00',
      'ok',
    ]);
    fc.assert(
      fc.property(fc.array(fc.nat(text.length)), (cuts) => {
        const splitter = createSplitter();
        const ends = [...cuts.sort((a, b) => a - b), text.length];
        const lines = ends.flatMap((end, index) =>
          splitter.push(text.slice(index === 0 ? 0 : ends[index - 1], end)),
        );
        expect(lines).toEqual(whole);
      }),
    );
  });

  it('keeps no more than one line of noise', () => {
    const splitter = createSplitter();
    const pieces = splitter.push('x'.repeat(5_000));
    expect(pieces.every((piece) => piece.length === 512)).toBe(true);
    expect(splitter.push('\n')).toHaveLength(1);
  });
});

describe('a conversation', () => {
  it('numbers its lines one after the other and tells each its own replies', async () => {
    const port = new TestPort(() => 'X:0.00 Y:0.00 Z:0.00 E:0.00\nok\n');
    const conversation = createConversation(port, new HandClock(), () => undefined);
    await conversation.ask('M110 N0', { line: 0 });
    await conversation.ask('M115');
    const answer = await conversation.ask('M114', { needs: 'position' });
    expect(port.written).toEqual(['N0 M110 N0*125\n', 'N1 M115*39\n', 'N2 M114*37\n']);
    expect(answer.outcome === 'ok' && answer.replies.map(({ kind }) => kind)).toEqual(['position', 'ok']);
  });

  it('never has two lines in flight', async () => {
    const port = new TestPort();
    const conversation = createConversation(port, new HandClock(), () => undefined);
    const first = conversation.ask('M400');
    expect(() => conversation.ask('M114')).toThrow('in flight');
    port.say('ok\n');
    expect((await first).outcome).toBe('ok');
  });

  it('ends what is in flight with the port, and writes nothing after', async () => {
    const port = new TestPort();
    const conversation = createConversation(port, new HandClock(), () => undefined);
    const asked = conversation.ask('M400');
    await port.close();
    expect(await asked).toEqual({ outcome: 'failed', failure: 'closed' });
    expect(await conversation.ask('M114')).toEqual({ outcome: 'failed', failure: 'closed' });
    conversation.interrupt('M112');
    expect(port.written).toHaveLength(1);
  });

  it('has a deadline for a port that dies without a word', async () => {
    const clock = new HandClock();
    const asked = createConversation(new TestPort(), clock, () => undefined).ask('M400', {
      expectedMs: 2_000,
    });
    await clock.pass(4 * 5_100);
    expect(await asked).toEqual({ outcome: 'failed', failure: 'silent' });
  });

  // Once: a timer that fired 0.3 ms early left the line waiting for ever.
  it('goes on when a timer fires a little early', async () => {
    const clock = new HandClock();
    const early: Clock = {
      ...clock,
      nowMs: clock.nowMs,
      date: clock.date,
      after: (ms, call) => clock.after(ms - 0.3, call),
    };
    const port = new TestPort();
    const asked = createConversation(port, early, () => undefined).ask('M400', { expectedMs: 1_000 });
    await clock.pass(4_200);
    expect(port.written).toHaveLength(3);
    port.say('ok\n');
    expect((await asked).outcome).toBe('ok');
  });

  it('interrupts with a line of its own, unnumbered and at once', () => {
    const port = new TestPort();
    const conversation = createConversation(port, new HandClock(), () => undefined);
    void conversation.ask('M400');
    conversation.interrupt('M112');
    expect(port.written.at(-1)).toBe('M112\n');
  });
});

describe('a greeting', () => {
  const IDENTITY = 'FIRMWARE_NAME:Marlin 2.1.2 MACHINE_TYPE:rig\nCap:EMERGENCY_PARSER:1\n';

  async function greeted(port: TestPort, mayReset: boolean, meanwhile: (clock: HandClock) => Promise<void>) {
    const clock = new HandClock();
    const ear = createEar(clock);
    const conversation = createConversation(port, clock, (reply) => ear.hear(reply));
    const greeting = greet(conversation, ear, clock, mayReset);
    await meanwhile(clock);
    return greeting;
  }

  it('waits for start and half a second of quiet where opening resets the board', async () => {
    const port = new TestPort((line) => (line.includes('M115') ? `${IDENTITY}ok\n` : 'ok\n'));
    const greeting = await greeted(port, true, async (clock) => {
      await clock.pass(1_000);
      port.say('start\nMarlin 2.1.2\n');
      await clock.pass(400);
      port.say('echo:  M92 X80\n');
      await clock.pass(400);
      expect(port.written).toEqual([]);
      await clock.pass(200);
    });
    expect(greeting).toMatchObject({ outcome: 'met', bannerSeen: true });
    expect(port.written).toEqual(['N0 M110 N0*125\n', 'N1 M115*39\n']);
  });

  it('wakes a board that says nothing with a newline', async () => {
    const port = new TestPort((line) =>
      line.includes('M115') ? `${IDENTITY}ok\n` : line === '\n' ? null : 'ok\n',
    );
    const greeting = await greeted(port, true, (clock) => clock.pass(4_000));
    expect(greeting).toMatchObject({ outcome: 'met', bannerSeen: false });
    expect(port.written[0]).toBe('\n');
  });

  it('is not led astray by an ok that was meant for an earlier sender', async () => {
    const port = new TestPort((line) => {
      if (line === '\n') return null;
      // The ok of the dead agent's line comes first, so that each answer is one late.
      return line.includes('M115') ? `ok\n${IDENTITY}ok\n` : 'ok\n';
    });
    const greeting = await greeted(port, false, (clock) => clock.pass(1_000));
    expect(greeting).toMatchObject({
      outcome: 'met',
      firmware: { capabilities: { EMERGENCY_PARSER: true } },
    });
  });

  it('refuses what speaks another language, with the reason', async () => {
    const duet = new TestPort((line) =>
      line.includes('M115') ? 'FIRMWARE_NAME: RepRapFirmware for Duet 2\nok\n' : 'ok\n',
    );
    expect(await greeted(duet, false, (clock) => clock.pass(1_000))).toMatchObject({
      outcome: 'stranger',
    });
    const grbl = new TestPort((line) => (line === '\n' ? null : 'error:20\n'));
    expect(await greeted(grbl, false, (clock) => clock.pass(60_000))).toMatchObject({
      outcome: 'stranger',
      reason: expect.stringContaining('grbl') as string,
    });
  });
});
