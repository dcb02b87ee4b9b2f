import { describe, expect, it } from 'vitest';
import { watchPort } from '@/agent/fleet/port-log';
import { loggedRecorder } from '@/agent/fleet/rig-log';
import { createLog, type LogEntry, type LogFormat } from '@/agent/log';
import type { EventBody } from '@/lib/protocol/events';

const AT = new Date('2026-12-01T08:00:00.000Z');

function written(format: LogFormat, ...entries: LogEntry[]): string[] {
  const lines: string[] = [];
  const log = createLog({ format, level: 'info', date: () => AT, write: (line) => lines.push(line) });
  for (const entry of entries) log(entry);
  return lines;
}

describe('the agent’s log', () => {
  const entry: LogEntry = { level: 'warning', rig: 'Curlew', code: 'rig-lost', message: 'a\n"b"' };

  it('is one JSON object a line, whatever the firmware said', () => {
    const [line = '', ...more] = written('json', entry);
    expect(more).toEqual([]);
    expect(line.match(/\n/g)).toHaveLength(1);
    expect(JSON.parse(line)).toEqual({ at: AT.toISOString(), ...entry });
  });

  it.each([
    ['error', '<3>'],
    ['warning', '<4>'],
    ['info', '<6>'],
  ] as const)('gives the journal the priority of %s in front', (level, prefix) => {
    const [line = ''] = written('journal', { ...entry, level });
    expect(line.slice(0, 3)).toBe(prefix);
    expect(JSON.parse(line.slice(3))).toMatchObject({ rig: 'Curlew', level });
  });

  it('is a line of text on a terminal', () => {
    expect(written('text', entry)).toEqual([`${AT.toISOString()} WARNING Curlew: a "b" (rig-lost)\n`]);
  });

  it('leaves out what is less than wanted, and no rig where none is meant', () => {
    const [line = '', ...more] = written('json', { ...entry, level: 'debug' }, { ...entry, rig: undefined });
    expect(more).toEqual([]);
    expect(JSON.parse(line)).not.toHaveProperty('rig');
  });
});

describe('a rig in the log', () => {
  it('has each event under its name, and the recorder has it, too', async () => {
    const entries: LogEntry[] = [];
    const bodies: EventBody[] = [];
    const recorder = loggedRecorder(
      {
        event: (body) => Promise.resolve(void bodies.push(body)),
        note: () => Promise.resolve(),
        memoryOf: () => null,
        full: true,
      },
      (entry) => entries.push(entry),
      'Curlew',
    );
    const body: EventBody = {
      kind: 'rig-lost',
      rigId: '00000000-0000-4000-8000-000000000010',
      reason: 'cable',
    };
    await recorder.event(body, AT);
    expect(bodies).toEqual([body]);
    expect(entries).toEqual([
      { level: 'warning', rig: 'Curlew', code: 'rig-lost', message: 'rig lost: cable' },
    ]);
    expect(recorder.full).toBe(true);
  });

  it('has what is wrong with its port once, however often it is tried', () => {
    const entries: LogEntry[] = [];
    const watch = watchPort('Curlew', (entry) => entries.push(entry));
    for (let tries = 0; tries < 3; tries += 1) {
      watch({ port: 'opening', portProblem: 'gone' });
      watch({ port: 'closed', portProblem: 'gone' });
    }
    watch({ port: 'open', portProblem: null });
    watch({ port: 'closed', portProblem: 'gone' });
    expect(entries.map(({ code, message }) => [code, message])).toEqual([
      ['port-closed', 'gone'],
      ['port-closed', 'gone'],
    ]);
  });
});
