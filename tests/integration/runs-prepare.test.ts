import { createHash } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { checkProgram } from '@/lib/program/check';
import { prepareRun } from '@/lib/services/runs/prepare-run';
import { loadSpool } from '@/lib/services/spools/load-spool';
import { readRunProgram } from '@/lib/services/traffic/read-run-program';
import { takeCommands } from '@/lib/services/traffic/take-commands';
import {
  addLot,
  errorCode,
  type FloorWorld,
  openFloorWorld,
  prepare,
  standingAlarms,
  TestJournal,
} from '@/tests/support/floor-world';
import { listenForNews } from '@/tests/support/news';

let floor: FloorWorld;
beforeAll(async () => {
  floor = await openFloorWorld({ rigs: 4 });
});
afterAll(() => floor.close());

const rig = (index: number) => floor.rigIds[index] ?? '';
const give = (lotId: string, rigId: string) =>
  floor.world.db.transaction((db) => prepareRun({ ctx: { ...floor.system(), db }, input: { lotId, rigId } }));
const lotState = async (lotId: string) => {
  const [row] = await floor.world.query<{ state: string }>('select state from lots where id = $1', [lotId]);
  return row?.state;
};

describe('a lot that is given to a rig', () => {
  it('brings its program, fit for the rig, and the agent is told to take it', async () => {
    const run = await prepare(floor, rig(0), 3);
    expect(await lotState(run.lotId)).toBe('given');
    const [command] = await takeCommands({ ctx: floor.agent(), again: false });
    expect(command).toMatchObject({ kind: 'take-program', rigId: rig(0), runId: run.runId });
    const sent = await readRunProgram({ ctx: floor.agent(), input: { runId: run.runId } });
    expect(command?.fence).toBe(sent.fence);
    expect(sent.programSha256).toBe(createHash('sha256').update(sent.program).digest('hex'));
    expect(checkProgram(sent.program, sent.profile, sent)).toEqual([]);
    expect(sent.firstPieces).toBe(3);
  });

  it('goes back to waiting by the agent’s word, and its rig takes the next tag and a higher fence', async () => {
    const read = async (runId: string) => readRunProgram({ ctx: floor.agent(), input: { runId } });
    await floor.world.query('update rigs set last_tag = 98 where id = $1', [rig(1)]);
    // The other rig's run gets out of the way of the tag that follows on 99.
    await floor.world.query('update runs set tag = 50 where rig_id <> $1', [rig(1)]);
    const first = await prepare(floor, rig(1), 3);
    const journal = new TestJournal(floor);
    await journal.tell({ kind: 'program-dropped', rigId: rig(1), runId: first.runId });
    expect(await lotState(first.lotId)).toBe('waiting');
    const again = await give(first.lotId, rig(1));
    if (!again.ok) throw new Error(again.reason);
    const [one, two] = [await read(first.runId), await read(again.runId)];
    expect([one.tag, two.tag]).toEqual([99, 1]);
    expect(two.fence).toBeGreaterThan(one.fence);
  });

  it('has a tag that no run on another rig has, so that swapped cables show in the register', async () => {
    const tagOn = async (rigId: string) => {
      const [row] = await floor.world.query<{ tag: number }>(
        "select tag from runs where rig_id = $1 and state <> 'dropped' order by prepared_at desc limit 1",
        [rigId],
      );
      return row?.tag;
    };
    await floor.world.query('update runs set tag = 7 where rig_id = $1', [rig(1)]);
    await floor.world.query('update rigs set last_tag = 6 where id = $1', [rig(2)]);
    const { runId } = await prepare(floor, rig(2), 3);
    expect([await tagOn(rig(1)), await tagOn(rig(2))]).toEqual([7, 8]);
    await new TestJournal(floor).tell({ kind: 'program-dropped', rigId: rig(2), runId });
  });
});

describe('law 9: nothing moves out of its limits', () => {
  it('a lot too long for the rig is refused with the reason, raises an alarm, and waits on', async () => {
    const { lotId } = await addLot(floor, { pieces: 3, lengthMm: 2_001 });
    const answer = await give(lotId, rig(2));
    expect(answer).toMatchObject({ ok: false, reason: expect.stringContaining('Rig 3') as unknown });
    expect(await lotState(lotId)).toBe('waiting');
    expect(await standingAlarms(floor)).toContain('program refused');
    const [row] = await floor.world.query('select count(*)::int as runs from runs where lot_id = $1', [
      lotId,
    ]);
    expect(row).toEqual({ runs: 0 });
  });

  it('the alarm ends with the next program that fits', async () => {
    await prepare(floor, rig(2), 3);
    expect(await standingAlarms(floor)).not.toContain('program refused');
  });

  it('another wire than the lot’s is refused', async () => {
    await loadSpool({ ctx: await floor.as('operator'), input: { rigId: rig(3), spoolId: null } });
    const { lotId } = await addLot(floor, { pieces: 3 });
    await expect(give(lotId, rig(3))).rejects.toEqual(errorCode('wrong-wire'));
  });
});

describe('law 6: a change and what it causes are one transaction', () => {
  it('news, commands and outbox of a transaction that fails are never seen', async () => {
    const listener = await listenForNews(floor.world.url);
    const counts = async () => {
      const [row] = await floor.world.query(
        'select (select count(*) from commands)::int as commands, (select count(*) from outbox)::int as outbox',
      );
      return row;
    };
    const before = await counts();
    await floor.world.query(
      'update rigs set spool_id = (select id from spools where label = $2) where id = $1',
      [rig(3), 'S-4'],
    );
    const { lotId } = await addLot(floor, { pieces: 3 });
    const failing = floor.world.db.transaction(async (db) => {
      await prepareRun({ ctx: { ...floor.system(), db }, input: { lotId, rigId: rig(3) } });
      throw new Error('the power went');
    });
    await expect(failing).rejects.toThrow('the power went');
    expect(await counts()).toEqual(before);
    expect(await lotState(lotId)).toBe('waiting');
    expect(await listener.heard('command')).toEqual([]);
    expect(await listener.heard('rig')).toEqual([]);
    await listener.close();
  });
});
