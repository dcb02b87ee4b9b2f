import { randomUUID } from 'node:crypto';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { systemClock } from '@/agent/clock';
import { backOffMs, slowBackOffMs } from '@/agent/uplink/back-off';
import { Teller, type Notice } from '@/agent/uplink/notices';
import { problemOf, type CallResult } from '@/agent/uplink/server-call';
import { SkewMeter } from '@/agent/uplink/skew';
import { LineAssembler, readStreamLine } from '@/agent/uplink/stream-lines';
import { uploadStep, type UploadStep } from '@/agent/uplink/upload-step';
import { Bell, pauseUntil } from '@/agent/uplink/waiting';

describe('the pause before another try', () => {
  it.each([
    [1, 0, 50],
    [1, 0.5, 75],
    [2, 0, 100],
    [4, 0, 400],
    [8, 0, 5_000],
    [1_000, 0, 5_000],
  ])('after %d failures with chance %d is %d ms', (tries, random, ms) => {
    expect(backOffMs(tries, random)).toBe(ms);
  });

  it('never exceeds its ceiling, nor falls to nothing', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1 }), fc.double({ min: 0, max: 0.999, noNaN: true }), (tries, random) => {
        expect(backOffMs(tries, random)).toBeGreaterThanOrEqual(50);
        expect(backOffMs(tries, random)).toBeLessThanOrEqual(10_000);
        expect(slowBackOffMs(random)).toBeGreaterThanOrEqual(30_000);
      }),
    );
  });
});

describe('the skew between two clocks', () => {
  const at = (ms: number) => new Date(1_800_000_000_000 + ms);

  it('takes the server’s time for that of the middle of the shortest trip', () => {
    const meter = new SkewMeter();
    expect(meter.skewMs).toBe(0);
    // Sent at 0, answered at 100 by a server that read 1,050: 1,000 ahead.
    meter.add(at(0), 100, at(1_050));
    expect(meter.skewMs).toBe(1_000);
    // A slow, lopsided trip does not count against a short one.
    meter.add(at(1_000), 900, at(2_800));
    expect(meter.skewMs).toBe(1_000);
    meter.add(at(2_000), 10, at(3_010));
    expect(meter.skewMs).toBe(1_005);
  });

  it('forgets trips that are 16 reports old, so that a clock put right is noticed', () => {
    const meter = new SkewMeter();
    meter.add(at(0), 2, at(60_001));
    for (let trip = 1; trip <= 16; trip += 1) meter.add(at(trip), 20, at(trip + 10));
    expect(meter.skewMs).toBe(0);
  });
});

describe('what follows an upload of events 11 to 20 of 30', () => {
  const ok = (body: unknown): CallResult => ({ ok: true, body, sentAt: new Date(0), roundTripMs: 1 });
  const gap = (details: Record<string, unknown>): CallResult => ({ ok: false, code: 'journal-gap', details });
  const not = (code: Extract<CallResult, { ok: false }>['code']): CallResult => ({
    ok: false,
    code,
    details: {},
  });

  it.each<[string, CallResult, Partial<UploadStep>]>([
    ['all stored', ok({ storedThrough: 20 }), { step: 'stored', through: 20 }],
    ['more stored than sent', ok({ storedThrough: 30 }), { step: 'stored', through: 30 }],
    ['part stored', ok({ storedThrough: 11 }), { step: 'stored', through: 11 }],
    ['nothing stored', ok({ storedThrough: 10 }), { step: 'retry', slow: false }],
    ['less stored than before', ok({ storedThrough: 4 }), { step: 'go-from', sequence: 5 }],
    ['more stored than exists', ok({ storedThrough: 31 }), { step: 'stop', code: 'event-conflict' }],
    ['an answer of another shape', ok({ stored: 20 }), { step: 'retry', code: 'unexpected' }],
    ['a gap before', gap({ expected: 5 }), { step: 'go-from', sequence: 5 }],
    ['a gap where there is none', gap({ expected: 11 }), { step: 'retry' }],
    ['a jump ahead', gap({ expected: 31 }), { step: 'go-from', sequence: 31 }],
    ['a jump beyond the journal', gap({ expected: 32 }), { step: 'stop', code: 'event-conflict' }],
    ['a gap without its number', gap({}), { step: 'retry' }],
    ['a conflict', not('event-conflict'), { step: 'stop', code: 'event-conflict' }],
    ['no answer', not('service-away'), { step: 'retry', slow: false }],
    ['a refused token', not('token-refused'), { step: 'retry', slow: true }],
    ['another version', not('protocol-unknown'), { step: 'retry', slow: true }],
    ['a refused body', not('bad-input'), { step: 'retry', slow: true }],
  ])('with %s', (_what, result, step) => {
    expect(uploadStep(result, 11, 30)).toMatchObject(step);
  });
});

describe('an answer that is not good', () => {
  it.each([
    [409, { code: 'journal-gap', details: { expected: 3 } }, 'journal-gap'],
    [401, { code: 'something-new' }, 'token-refused'],
    [426, '<html>', 'protocol-unknown'],
    [502, undefined, 'service-away'],
    [429, undefined, 'service-away'],
    [418, null, 'unexpected'],
  ])('of status %d with body %j means %s', (status, body, code) => {
    expect(problemOf(status, body).code).toBe(code);
  });
});

describe('lines of the command stream', () => {
  it('come out whole and in order wherever the bytes are split', () => {
    const text = fc.array(fc.string({ unit: 'binary' }).map((line) => line.replace(/[\r\n]/g, ' ')));
    fc.assert(
      fc.property(text, fc.array(fc.nat({ max: 400 })), (lines, cuts) => {
        const bytes = Buffer.from(lines.map((line) => `${line}\n`).join(''));
        const assembler = new LineAssembler();
        const places = [
          0,
          ...cuts.map((cut) => cut % (bytes.length + 1)).sort((a, b) => a - b),
          bytes.length,
        ];
        const found = places.flatMap((from, index) =>
          assembler.take(bytes.subarray(from, places[index + 1])),
        );
        const wanted = Buffer.from(lines.join('\n')).toString('utf8').split('\n');
        expect(found).toEqual(wanted.map((line) => line.trim()).filter((line) => line !== ''));
      }),
    );
  });

  it('are dropped when too long, without keeping them, and the next one is whole', () => {
    const assembler = new LineAssembler();
    for (let piece = 0; piece < 100; piece += 1) {
      expect(assembler.take(Buffer.from('x'.repeat(1_000)))).toEqual([]);
    }
    expect(assembler.take(Buffer.from('end\nnext\n'))).toEqual([null, 'next']);
  });

  it('never throw, whatever they say', () => {
    fc.assert(
      fc.property(fc.oneof(fc.string(), fc.json()), (text) => {
        expect(['line', 'refuse', 'other-protocol', 'nothing']).toContain(readStreamLine(text).read);
      }),
      { numRuns: 2_000 },
    );
  });

  it('may bear fields that this software does not know', () => {
    const ping = { line: 'ping', serverAt: '2026-12-01T12:00:00Z', weather: 'rain' };
    expect(readStreamLine(JSON.stringify(ping))).toMatchObject({ read: 'line', line: { line: 'ping' } });
  });

  it('with a command of an unknown kind give its id, to refuse it by', () => {
    const id = randomUUID();
    const line = { line: 'command', command: { id, kind: 'dance' } };
    expect(readStreamLine(JSON.stringify(line))).toEqual({
      read: 'refuse',
      commandId: id,
      code: 'protocol-unknown',
    });
  });
});

describe('notices', () => {
  it('are told when something changes, not on every try', () => {
    const told: Notice[] = [];
    const teller = new Teller((notice) => told.push(notice));
    teller.works('events');
    for (let tries = 0; tries < 3; tries += 1) teller.fails('events', 'service-away');
    teller.fails('events', 'token-refused');
    teller.works('events');
    teller.works('events');
    teller.fails('reports', 'service-away');
    expect(told.map(({ topic, code }) => [topic, code])).toEqual([
      ['events', 'service-away'],
      ['events', 'token-refused'],
      ['events', null],
      ['reports', 'service-away'],
    ]);
  });
});

describe('waiting', () => {
  it('keeps a ring that nobody waited for, once', async () => {
    const bell = new Bell();
    bell.ring();
    bell.ring();
    await bell.wait();
    const order: string[] = [];
    const second = bell.wait().then(() => order.push('rung'));
    order.push('waiting');
    bell.ring();
    await second;
    expect(order).toEqual(['waiting', 'rung']);
  });

  it('ends at once on closing', async () => {
    const closing = new AbortController();
    const hour = pauseUntil(systemClock(), 3_600_000, closing.signal);
    closing.abort();
    await hour;
    await pauseUntil(systemClock(), 3_600_000, closing.signal);
    expect(closing.signal.aborted).toBe(true);
  });
});
