import { describe, expect, it } from 'vitest';
import { alarmWords } from '@/lib/fleet/alarm-words';
import { ALARM_PRIORITIES, type AlarmKind } from '@/lib/fleet/alarms';
import { needsOf } from '@/lib/fleet/needs';
import { floorSentence } from '@/lib/fleet/sentence';
import type { AlarmDto } from '@/lib/schemas/floor';
import { aRig, aRun } from './a-rig';

const nothingWaits = { lots: 0, pieces: 0, next: null };
const clock = (at: string) => at.slice(11, 16);

let alarms = 0;

function anAlarm(kind: AlarmKind, over: Partial<AlarmDto> = {}): AlarmDto {
  alarms += 1;
  return {
    id: `66666666-6666-4666-8666-${String(alarms).padStart(12, '0')}`,
    kind,
    priority: ALARM_PRIORITIES[kind],
    rigId: aRig().id,
    rigName: 'Siskin',
    runId: null,
    raisedAt: '2026-12-01T12:56:00.000Z',
    acknowledgedByName: null,
    acknowledgedAt: null,
    details: {},
    ...over,
  };
}

describe('who must go where', () => {
  it('asks nobody while rigs are cutting, out of service or ready without a lot', () => {
    const rigs = [aRig(), aRig({ state: 'cutting', run: aRun() }), aRig({ state: 'out of service' })];
    expect(needsOf(rigs)).toEqual([]);
  });

  it('puts an open guard before a misfeed and a misfeed before a full tray, whatever the bench order', () => {
    const rigs = [
      aRig({ name: 'Full', benchOrder: 1, state: 'tray full', alarms: [anAlarm('tray to clear')] }),
      aRig({ name: 'Misfed', benchOrder: 2, state: 'held', alarms: [anAlarm('run held')] }),
      aRig({ name: 'Open', benchOrder: 3, state: 'blocked', alarms: [anAlarm('guard opened in a run')] }),
    ];
    expect(needsOf(rigs).map((need) => [need.rigName, need.mark])).toEqual([
      ['Open', 'danger'],
      ['Misfed', 'abnormal'],
      ['Full', 'abnormal'],
    ]);
  });

  it('says every alarm of a rig, and who is on it', () => {
    const both = [anAlarm('tray to clear'), anAlarm('surplus pieces', { acknowledgedByName: 'M. Tolland' })];
    const needs = needsOf([aRig({ state: 'tray full', alarms: both })]);
    expect(needs.map((need) => need.alarm?.byName ?? null)).toEqual(['M. Tolland', null]);
  });

  it('says how many first pieces to measure and how many wait for it', () => {
    const run = aRun({
      state: 'held',
      holdReason: 'first-pieces',
      cut: 5,
      pieces: 96,
      piecesToMeasure: [1, 2, 3, 4, 5],
    });
    const rig = aRig({ state: 'held', run, alarms: [anAlarm('first pieces to measure')] });
    expect(needsOf([rig])[0]?.happened).toBe('5 pieces cut, measure them before the other 91');
  });

  it('offers a lot that can start, unmarked, after all that is wrong', () => {
    const rigs = [
      aRig({ name: 'Can start', benchOrder: 1, run: aRun({ state: 'prepared' }) }),
      aRig({ name: 'Held', benchOrder: 2, state: 'held', alarms: [anAlarm('run held')] }),
    ];
    expect(needsOf(rigs).map((need) => [need.rigName, need.mark])).toEqual([
      ['Held', 'abnormal'],
      ['Can start', 'normal'],
    ]);
  });

  it.each(Object.keys(ALARM_PRIORITIES) as AlarmKind[])(
    'says of “%s” what happened and what to do',
    (kind) => {
      const words = alarmWords(anAlarm(kind), aRig({ run: aRun({ state: 'held' }) }));
      expect(words.happened.length).toBeGreaterThan(5);
      expect(words.bring.length).toBeGreaterThan(5);
    },
  );
});

describe('the floor’s first sentence', () => {
  it('counts in words and keeps number and verb together', () => {
    const one = [aRig({ state: 'held', alarms: [anAlarm('piece in doubt'), anAlarm('surplus pieces')] })];
    expect(floorSentence(one, needsOf(one), nothingWaits, clock)).toEqual({
      urgent: 'One rig needs somebody.',
      rest: 'None is cutting.',
    });
    const two = [aRig({ state: 'cutting', run: aRun() }), aRig({ state: 'cutting', run: aRun() })];
    expect(floorSentence(two, needsOf(two), nothingWaits, clock)).toEqual({
      urgent: 'Nobody is needed.',
      rest: 'Two are cutting.',
    });
  });

  it('names the batch that is due first and why it waits', () => {
    const waiting = {
      lots: 3,
      pieces: 900,
      next: {
        batchId: aRun().batchId,
        batchName: 'Trainer C',
        dueAt: '2026-12-01T15:40:00.000Z',
        reason: 'No rig has GN 30 AWG loaded.',
      },
    };
    expect(floorSentence([aRig()], [], waiting, clock).rest).toBe(
      'None is cutting. Trainer C is due 15:40 and waits: No rig has GN 30 AWG loaded.',
    );
  });
});
