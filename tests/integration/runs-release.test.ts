import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { acknowledgeAlarm } from '@/lib/services/alarms/acknowledge-alarm';
import { sweepSilence } from '@/lib/services/alarms/sweep-silence';
import { readRig } from '@/lib/services/floor/read-rig';
import { clearTray } from '@/lib/services/runs/clear-tray';
import { askForDrop } from '@/lib/services/runs/drop-run';
import { prepareRun } from '@/lib/services/runs/prepare-run';
import { releaseLot } from '@/lib/services/runs/release-lot';
import { stopRun } from '@/lib/services/runs/stop-run';
import { answerCommand } from '@/lib/services/traffic/answer-command';
import { takeCommands } from '@/lib/services/traffic/take-commands';
import {
  addLot,
  cuts,
  errorCode,
  type FloorWorld,
  goodReport,
  openFloorWorld,
  prepare,
  report,
  runRow,
  standingAlarms,
  TestJournal,
} from '@/tests/support/floor-world';

let floor: FloorWorld;
let journal: TestJournal;
let rigs: string[];
let run: Awaited<ReturnType<typeof prepare>>;

beforeAll(async () => {
  floor = await openFloorWorld({ rigs: 8 });
  journal = new TestJournal(floor);
  rigs = [...floor.rigIds];
});
afterAll(() => floor.close());

const nextRig = () => rigs.shift() ?? '';
const of = () => ({ rigId: run.rigId, runId: run.runId });
const started = async () => {
  const { actor } = await floor.as('operator');
  return { kind: 'run-started', ...of(), personId: actor.personId, commandId: randomUUID() } as const;
};
const release = async () =>
  releaseLot({ ctx: await floor.as('maintainer'), input: { runId: run.runId, reason: 'computer is dead' } });
const lots = () =>
  floor.world.query<{ pieces: number; state: string; on_rig: boolean }>(
    'select pieces, state, rig_id is not null as on_rig from lots where line_id = $1 order by number',
    [run.lineId],
  );
const give = (lotId: string, rigId: string) =>
  floor.world.db.transaction((db) => prepareRun({ ctx: { ...floor.system(), db }, input: { lotId, rigId } }));

describe('law 4: no lot is on two rigs', () => {
  it('also when two dispatches give it at the same moment', async () => {
    const { lotId } = await addLot(floor, { pieces: 5 });
    const answers = await Promise.allSettled(
      [nextRig(), nextRig(), nextRig()].map((rigId) => give(lotId, rigId)),
    );
    expect(answers.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    const [row] = await floor.world.query('select count(*)::int as runs from runs where lot_id = $1', [
      lotId,
    ]);
    expect(row).toEqual({ runs: 1 });
  });

  it('and no rig has two: a second lot is refused until the tray is empty', async () => {
    run = await prepare(floor, nextRig(), 10);
    const other = await addLot(floor, { pieces: 5 });
    await expect(give(other.lotId, run.rigId)).rejects.toEqual(errorCode('rig-busy'));
    await journal.tell(await started(), ...cuts(run, 1, 4), {
      kind: 'run-ended',
      ...of(),
      outcome: 'stopped',
      pieces: 4,
      personId: null,
    });
    await expect(give(other.lotId, run.rigId)).rejects.toEqual(errorCode('tray-not-cleared'));
  });

  it('the database refuses it too, whoever asks', async () => {
    const another = await addLot(floor, { pieces: 5 });
    await expect(
      floor.world.query("update lots set state = 'given', rig_id = $1 where id = $2", [
        run.rigId,
        another.lotId,
      ]),
    ).rejects.toMatchObject({ constraint: 'lots_one_per_rig' });
  });

  it('silence moves nothing: a rig that was unheard for an hour keeps its lot', async () => {
    run = await prepare(floor, nextRig(), 10);
    await report(floor, goodReport(floor, run.rigId));
    await journal.tell(await started(), ...cuts(run, 1, 3));
    floor.clock.pass(3_600_000);
    await sweepSilence({ ctx: floor.system() });
    expect(await standingAlarms(floor)).toContain('rig silent');
    expect(await lots()).toEqual([{ pieces: 10, state: 'running', on_rig: true }]);
  });

  it('a lot leaves a heard rig by its agent alone, and only some roles may take it from a silent one', async () => {
    await report(floor, goodReport(floor, run.rigId));
    await expect(release()).rejects.toEqual(errorCode('illegal-step'));
    floor.clock.pass(8_001);
    await expect(
      releaseLot({ ctx: await floor.as('operator'), input: { runId: run.runId, reason: 'hurry' } }),
    ).rejects.toEqual(errorCode('not-allowed'));
  });

  it('what was confirmed stays to be bagged, the rest waits anew, and a stop waits for the rig', async () => {
    await release();
    expect(await runRow(floor, run.runId)).toMatchObject({ state: 'released', cut: 3 });
    expect(await lots()).toEqual([
      { pieces: 3, state: 'cut', on_rig: true },
      { pieces: 7, state: 'waiting', on_rig: false },
    ]);
    const waiting = await takeCommands({ ctx: floor.agent(), again: false });
    expect(waiting).toContainEqual(expect.objectContaining({ kind: 'stop', runId: run.runId }));
    const named = await floor.world.query("select person_id from audit_entries where verb = 'run.release'");
    const { actor } = await floor.as('maintainer');
    expect(named).toEqual([{ person_id: actor.personId }]);
  });

  it('pieces reported later are kept as surplus with an alarm, and no count changes', async () => {
    await journal.tell(...cuts(run, 4, 6));
    expect(await runRow(floor, run.runId)).toMatchObject({ state: 'released', cut: 3, surplus: 3 });
    expect(await standingAlarms(floor)).toContain('surplus pieces');
    const [row] = await floor.world.query(
      "select count(*)::int as kept from events where run_id = $1 and kind = 'piece-cut'",
      [run.runId],
    );
    expect(row).toEqual({ kept: 6 });
    await journal.tell({ kind: 'run-ended', ...of(), outcome: 'stopped', pieces: 6, personId: null });
    expect(await runRow(floor, run.runId)).toMatchObject({ state: 'released' });
  });

  it('the rig gets nothing until its tray is empty, and the bag holds what was confirmed', async () => {
    const other = await addLot(floor, { pieces: 5 });
    await expect(give(other.lotId, run.rigId)).rejects.toEqual(errorCode('tray-not-cleared'));
    expect(await readRig({ ctx: await floor.as('operator'), rigId: run.rigId })).toMatchObject({
      state: 'silent',
      run: { id: run.runId, bagged: 3, surplus: 3 },
    });
    await clearTray({
      ctx: await floor.as('operator'),
      input: { runId: run.runId, scrapped: 0, sampled: 0 },
    });
    const bags = await floor.world.query('select pieces from bags where run_id = $1', [run.runId]);
    expect(bags).toEqual([{ pieces: 3 }]);
    expect(await standingAlarms(floor)).not.toContain('surplus pieces');
  });

  it('a lot of which nothing was confirmed is free as a whole', async () => {
    run = await prepare(floor, nextRig(), 10);
    await journal.tell(await started());
    await release();
    expect(await lots()).toEqual([{ pieces: 10, state: 'waiting', on_rig: false }]);
  });

  it('a lot that has not begun leaves a heard rig when the agent says so, not when it is asked', async () => {
    run = await prepare(floor, nextRig(), 10);
    const { actor, ...ctx } = await floor.as('operator');
    const commandId = await floor.world.db.transaction((db) =>
      askForDrop({ ...ctx, actor, db }, actor.personId, run.runId),
    );
    expect(await lots()).toEqual([{ pieces: 10, state: 'given', on_rig: true }]);
    const input = { outcome: 'done', at: floor.clock.iso() };
    await answerCommand({ ctx: floor.agent(), commandId, input });
    expect(await runRow(floor, run.runId)).toMatchObject({ state: 'dropped' });
    expect(await lots()).toEqual([{ pieces: 10, state: 'waiting', on_rig: false }]);
    await journal.tell({ kind: 'program-dropped', ...of() });
    expect(await lots()).toEqual([{ pieces: 10, state: 'waiting', on_rig: false }]);
  });
});

describe('law 8: stopping always works', () => {
  it('is taken from every role, for a run in any state, also when the rig is silent', async () => {
    const silent = { runId: run.runId };
    const asked = await stopRun({ ctx: await floor.as('scheduler'), input: silent });
    expect(asked).toMatchObject({ outcome: 'waiting' });
    const pending = await takeCommands({ ctx: floor.agent(), again: false });
    expect(pending).toContainEqual(expect.objectContaining({ kind: 'stop', id: asked.commandId }));
  });
});

describe('the alarm of a silent rig', () => {
  it('is raised once, named by whoever acknowledges it, and ended by the rig alone', async () => {
    run = await prepare(floor, nextRig(), 10);
    await report(floor, goodReport(floor, run.rigId));
    floor.clock.pass(8_000);
    await sweepSilence({ ctx: floor.system() });
    const mine =
      'select id, acknowledged_by as by, ended_at as over from alarms where rig_id = $1 and kind = $2';
    expect(await floor.world.query(mine, [run.rigId, 'rig silent'])).toEqual([]);
    floor.clock.pass(1);
    await sweepSilence({ ctx: floor.system() });
    await sweepSilence({ ctx: floor.system() });
    const [alarm, ...more] = await floor.world.query<{ id: string }>(mine, [run.rigId, 'rig silent']);
    expect(more).toEqual([]);
    const operator = await floor.as('operator');
    await acknowledgeAlarm({ ctx: operator, input: { alarmId: alarm?.id } });
    expect(await floor.world.query(mine, [run.rigId, 'rig silent'])).toMatchObject([
      { by: operator.actor.personId, over: null },
    ]);
    await report(floor, goodReport(floor, run.rigId));
    const [after] = await floor.world.query<{ over: Date | null }>(mine, [run.rigId, 'rig silent']);
    expect(after?.over).not.toBeNull();
  });
});
