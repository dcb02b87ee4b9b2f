import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { RigReport } from '@/lib/protocol/report';
import { LEAST_AGENT_VERSION } from '@/lib/protocol/version';
import { acknowledgeNotes } from '@/lib/services/runs/acknowledge-notes';
import { beginWorkHold } from '@/lib/services/runs/begin-work-hold';
import { endWorkHold } from '@/lib/services/runs/end-work-hold';
import { goOn } from '@/lib/services/runs/go-on';
import { startRun } from '@/lib/services/runs/start-run';
import { publishNotes } from '@/lib/services/rigs/publish-notes';
import {
  CHALLENGE,
  cuts,
  errorCode,
  type FloorWorld,
  goodReport,
  openFloorWorld,
  prepare,
  report,
  TestJournal,
} from '@/tests/support/floor-world';
import { startTestAgent, type TestAgent } from '@/tests/support/test-agent';

let floor: FloorWorld;
let agent: TestAgent;
let journal: TestJournal;
let run: Awaited<ReturnType<typeof prepare>>;
let sha: string;

beforeAll(async () => {
  floor = await openFloorWorld();
  agent = await startTestAgent(floor);
  journal = new TestJournal(floor);
  const [rigId] = floor.rigIds;
  run = await prepare(floor, rigId ?? '', 10);
  const [row] = await floor.world.query<{ sha: string }>(
    'select program_sha256 as sha from runs where id = $1',
    [run.runId],
  );
  sha = row?.sha ?? '';
});
afterAll(async () => {
  await agent.close();
  await floor.close();
});

const input = (presenceCode: string | null = '4711') => ({ runId: run.runId, presenceCode });
const start = async (code?: string | null) =>
  startRun({ ctx: await floor.as('operator'), input: input(code) });
const say = (over: Partial<RigReport> = {}) => report(floor, goodReport(floor, run.rigId, over));
const acknowledge = async (who: 'operator' | 'maintainer' = 'operator', full = true) =>
  acknowledgeNotes({
    ctx: await floor.as(who),
    input: { runId: run.runId, notesVersion: await notesVersion(), full },
  });
async function notesVersion(): Promise<number> {
  const [row] = await floor.world.query<{ version: number }>(
    'select max(version) as version from interlock_notes where rig_id = $1',
    [run.rigId],
  );
  return row?.version ?? 0;
}
const update = (sql: string) => floor.world.query(sql, [run.rigId]);

describe('law 5: a start is refused', () => {
  it('before the agent holds the program', async () => {
    await say();
    await expect(start()).rejects.toEqual(errorCode('program-not-held'));
    await journal.tell({ kind: 'program-held', rigId: run.rigId, runId: run.runId, programSha256: sha });
  });

  it('until this very person has confirmed the notes of this run', async () => {
    await say();
    await expect(start()).rejects.toEqual(errorCode('notes-not-acknowledged'));
    await acknowledge('maintainer');
    await expect(start()).rejects.toEqual(errorCode('notes-not-acknowledged'));
    await expect(acknowledge('operator', false)).rejects.toMatchObject({
      code: 'notes-not-acknowledged',
      details: { full: true },
    });
    await acknowledge('operator', true);
  });

  it('to a role that may not run rigs', async () => {
    await expect(startRun({ ctx: await floor.as('scheduler'), input: input() })).rejects.toEqual(
      errorCode('not-allowed'),
    );
  });

  it('without the code where a display is fitted', async () => {
    await say();
    await expect(start(null)).rejects.toEqual(errorCode('presence-missing'));
  });

  it('with the guard open, with no reading of it, and with one that is older than 5 s', async () => {
    const good = goodReport(floor, run.rigId).signals;
    await say({ signals: { ...good, guard: { reading: 'open', readAt: floor.clock.iso() } } });
    await expect(start()).rejects.toEqual(errorCode('guard-open'));
    await say({ signals: { ...good, guard: { reading: 'unknown' } } });
    await expect(start()).rejects.toEqual(errorCode('guard-open'));
    await say();
    floor.clock.pass(5_001);
    await expect(start()).rejects.toEqual(errorCode('guard-open'));
  });

  it('with a heater on or warm', async () => {
    const good = goodReport(floor, run.rigId).signals;
    const heater = { reading: 'warm' as const, targetC: 0, actualC: 80, readAt: floor.clock.iso() };
    await say({ signals: { ...good, heater } });
    await expect(start()).rejects.toEqual(errorCode('heater-on'));
  });

  it('with no wire loaded, or too little of it', async () => {
    await say();
    await update(
      'update spools s set used_mm = s.length_mm - 1000 from rigs g where g.spool_id = s.id and g.id = $1',
    );
    await expect(start()).rejects.toEqual(errorCode('wire-short'));
    await update('update spools s set used_mm = 0 from rigs g where g.spool_id = s.id and g.id = $1');
    const [spool] = await update('select spool_id from rigs where id = $1');
    await update('update rigs set spool_id = null where id = $1');
    await expect(start()).rejects.toEqual(errorCode('wrong-wire'));
    await floor.world.query("update rigs set spool_id = ($2::json->>'spool_id')::uuid where id = $1", [
      run.rigId,
      JSON.stringify(spool),
    ]);
  });

  it('under the work hold of another person, until that same person ends it', async () => {
    await say();
    const maintainer = await floor.as('maintainer');
    await beginWorkHold({ ctx: maintainer, input: { rigId: run.rigId, reason: 'new blade' } });
    await expect(start()).rejects.toEqual(errorCode('work-hold'));
    const operator = await floor.as('operator');
    await expect(endWorkHold({ ctx: operator, input: { rigId: run.rigId } })).rejects.toEqual(
      errorCode('work-hold'),
    );
    await endWorkHold({ ctx: maintainer, input: { rigId: run.rigId } });
  });

  it('on a rig that is out of service, silent, or not reached by USB', async () => {
    await update('update rigs set out_of_service_at = now() where id = $1');
    await expect(start()).rejects.toEqual(errorCode('out-of-service'));
    await update('update rigs set out_of_service_at = null where id = $1');
    await say({ port: 'closed' });
    await expect(start()).rejects.toEqual(errorCode('rig-not-connected'));
    await say();
    floor.clock.pass(8_001);
    await expect(start()).rejects.toEqual(errorCode('rig-silent'));
  });

  it('by an agent that is too old, or whose age nobody knows', async () => {
    await say();
    const software = (told: string | null) => floor.world.query('update agents set software = $1', [told]);
    for (const old of ['ellwand-agent 0.1.9', null]) {
      await software(old);
      await expect(start()).rejects.toEqual(errorCode('agent-too-old'));
    }
    await software(`ellwand-agent ${LEAST_AGENT_VERSION}`);
  });

  it('once the rig was given to somebody else meanwhile', async () => {
    await say();
    await update('update rigs set fence = fence + 1 where id = $1');
    await expect(start()).rejects.toEqual(errorCode('fence-old'));
    await update('update rigs set fence = fence - 1 where id = $1');
  });

  it('when the notes changed since they were confirmed', async () => {
    const fullText = 'Shut the guard, keep hands out of the jaws, and wear glasses from now on.';
    await publishNotes({
      ctx: await floor.as('owner'),
      input: { rigId: run.rigId, points: ['Glasses on.'], fullText },
    });
    await say();
    await expect(start()).rejects.toEqual(errorCode('notes-not-acknowledged'));
    await expect(acknowledge('operator', false)).rejects.toEqual(errorCode('notes-not-acknowledged'));
    await acknowledge('operator', true);
  });
});

describe('a start', () => {
  it('that the rig refuses tells its reason', async () => {
    await say();
    agent.answer = () => ({ refused: 'presence-wrong' });
    expect(await start('0000')).toMatchObject({ outcome: 'refused', code: 'presence-wrong' });
    agent.answer = () => 'done';
  });

  it('with every condition met reaches the agent with challenge, fence, program and who vouches', async () => {
    await say();
    expect(await start()).toMatchObject({ outcome: 'done', code: null });
    const { actor } = await floor.as('operator');
    expect(agent.taken.at(-1)).toMatchObject({
      kind: 'start-run',
      challenge: CHALLENGE,
      presenceCode: '4711',
      programSha256: sha,
      personId: actor.personId,
      conditions: { notesVersion: 2, acknowledgedBy: actor.personId, trayCleared: true, workHold: false },
    });
  });

  it('is asked for once: a run that is cutting is not started again', async () => {
    const { actor } = await floor.as('operator');
    await journal.tell({
      kind: 'run-started',
      rigId: run.rigId,
      runId: run.runId,
      personId: actor.personId,
      commandId: randomUUID(),
    });
    await say();
    await expect(start()).rejects.toEqual(errorCode('illegal-step'));
  });
});

describe('going on', () => {
  const go = async () => goOn({ ctx: await floor.as('operator'), input: input() });
  const hold = (reason: 'first-pieces' | 'doubt') =>
    journal.tell({ kind: 'run-held', rigId: run.rigId, runId: run.runId, reason, note: '' });

  it('is refused while a piece is in doubt', async () => {
    await journal.tell({ kind: 'piece-doubted', rigId: run.rigId, runId: run.runId, piece: 1, wireMm: 120 });
    await hold('doubt');
    await say();
    await expect(go()).rejects.toEqual(errorCode('doubt-open'));
    const { actor } = await floor.as('operator');
    await journal.tell({
      kind: 'piece-settled',
      rigId: run.rigId,
      runId: run.runId,
      piece: 1,
      answer: 'discard',
      personId: actor.personId,
    });
  });

  it('is refused until the first pieces are measured', async () => {
    await journal.tell(...cuts(run, 1, 5));
    await hold('first-pieces');
    await say();
    await expect(go()).rejects.toEqual(errorCode('first-pieces-open'));
  });
});
