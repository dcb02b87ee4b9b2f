import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { isNews } from '@/lib/fleet/report-change';
import { revokeAgent } from '@/lib/services/agents/revoke-agent';
import { showCode } from '@/lib/services/runs/show-code';
import { answerCommand } from '@/lib/services/traffic/answer-command';
import { LEAST_AGENT_VERSION } from '@/lib/protocol/version';
import { authenticateAgent } from '@/lib/services/traffic/authenticate-agent';
import { authenticateRecentAgent } from '@/lib/services/traffic/authenticate-recent-agent';
import { awaitOutcome } from '@/lib/services/traffic/await-outcome';
import { expireCommands } from '@/lib/services/traffic/expire-commands';
import { ingestEvents } from '@/lib/services/traffic/ingest-events';
import { issueCommand, type Order } from '@/lib/services/traffic/issue-command';
import { listBoundRigs } from '@/lib/services/traffic/list-bound-rigs';
import { readRunProgram } from '@/lib/services/traffic/read-run-program';
import { recordReport } from '@/lib/services/traffic/record-report';
import { takeCommands } from '@/lib/services/traffic/take-commands';
import { withdrawCommands } from '@/lib/services/traffic/withdraw-commands';
import {
  errorCode,
  type FloorWorld,
  goodReport,
  openFloorWorld,
  prepare,
  report,
} from '@/tests/support/floor-world';
import { listenForNews } from '@/tests/support/news';

let floor: FloorWorld;
let run: Awaited<ReturnType<typeof prepare>>;
let personId: string;

beforeAll(async () => {
  floor = await openFloorWorld({ rigs: 2 });
  run = await prepare(floor, floor.rigIds[0] ?? '', 5);
  personId = (await floor.as('operator')).actor.personId;
});
afterAll(() => floor.close());

const goOnOrder = (): Order => ({
  kind: 'go-on',
  rigId: run.rigId,
  runId: run.runId,
  presenceCode: null,
  firstPiecesAgain: false,
  conditions: {
    notesVersion: 1,
    acknowledgedBy: personId,
    acknowledgedAt: floor.clock.iso(),
    trayCleared: true,
    workHold: false,
    loadedWireId: floor.wireId,
    spoolLeftMm: 1000,
  },
});
const stopOrder = (): Order => ({ kind: 'stop', rigId: run.rigId, runId: run.runId });
const issue = (order: Order) => issueCommand(floor.system(), personId, order);
const take = async (again = false) => {
  const commands = await takeCommands({ ctx: floor.agent(), again });
  return commands.map(({ id }) => id);
};
const answer = (commandId: string, outcome: 'done' | 'refused') =>
  answerCommand({
    ctx: floor.agent(),
    commandId,
    input: { outcome, at: floor.clock.iso(), ...(outcome === 'refused' ? { code: 'guard-open' } : {}) },
  });
const outcomeOf = (commandId: string) => awaitOutcome(floor.system(), commandId, 0);
const hear = () => report(floor, goodReport(floor, run.rigId));

describe('a command', () => {
  it('that moves is refused for a silent rig, and a stop is not', async () => {
    await expect(issue(goOnOrder())).rejects.toEqual(errorCode('rig-silent'));
    const id = await issue(stopOrder());
    expect(await take()).toContain(id);
  });

  it('that moves is not handed out after 5 s, and is told as late', async () => {
    await hear();
    const [inTime, late] = [await issue(goOnOrder()), await issue(goOnOrder())];
    floor.clock.pass(4_999);
    const [first] = await takeCommands({ ctx: floor.agent(), again: false });
    expect([inTime, late]).toContain(first?.id);
    const next = await issue(goOnOrder());
    floor.clock.pass(5_000);
    expect(await take(true)).not.toContain(next);
    await expireCommands({ ctx: floor.system() });
    expect(await outcomeOf(next)).toMatchObject({ outcome: 'refused', code: 'command-late' });
  });

  it('goes to one stream of several, and is answered once', async () => {
    const id = await issue(stopOrder());
    const streams = await Promise.all([take(), take(), take()]);
    expect(streams.flat().filter((taken) => taken === id)).toHaveLength(1);
    await answer(id, 'done');
    await answer(id, 'refused');
    expect(await outcomeOf(id)).toEqual({ commandId: id, outcome: 'done', code: null });
  });

  it('that was sent and not answered comes again with the next stream, unless it moves something', async () => {
    await hear();
    const [quiet, moving] = [await issue(stopOrder()), await issue(goOnOrder())];
    expect(await take()).toEqual(expect.arrayContaining([quiet, moving]));
    expect(await take()).toEqual([]);
    const again = await take(true);
    expect(again).toContain(quiet);
    expect(again).not.toContain(moving);
    await answer(moving, 'refused');
    expect(await outcomeOf(moving)).toMatchObject({ outcome: 'refused', code: 'guard-open' });
  });

  it('of another agent cannot be answered', async () => {
    await expect(answer(randomUUID(), 'done')).rejects.toEqual(errorCode('not-found'));
  });

  it('of a person who is shut out is taken back, but not their stop', async () => {
    await hear();
    const [moving, stop] = [await issue(goOnOrder()), await issue(stopOrder())];
    await withdrawCommands(floor.system(), personId);
    const taken = await take();
    expect(taken).toContain(stop);
    expect(taken).not.toContain(moving);
  });

  it('tells `waiting` to the person when the rig does not answer in time', async () => {
    const operator = await floor.as('operator');
    expect(await showCode({ ctx: operator, input: { rigId: run.rigId } })).toMatchObject({
      outcome: 'waiting',
      code: null,
    });
  });
});

describe('a report', () => {
  it('puts the agent’s times on the server’s clock, whatever the agent’s says', async () => {
    const good = goodReport(floor, run.rigId);
    floor.clock.pass(90_000);
    const skewed = { ...good, signals: { ...good.signals, heater: { reading: 'not fitted' as const } } };
    const sentAt = new Date(floor.clock.nowMs - 90_000).toISOString();
    const input = { protocol: 1, sentAt, software: 't', journalId: randomUUID(), backlog: 0, rigs: [skewed] };
    expect(await recordReport({ ctx: floor.agent(), input })).toEqual({ serverAt: floor.clock.iso() });
    const [row] = await floor.world.query<{ at: string }>(
      "select report->'signals'->'guard'->>'readAt' as at from rig_reports where rig_id = $1",
      [run.rigId],
    );
    expect(row?.at).toBe(floor.clock.iso());
  });

  it('is told to screens at once when what they show changed, else once a second', async () => {
    const listener = await listenForNews(floor.world.url);
    const count = async () => (await listener.heard('rig')).filter(({ rigId }) => rigId === run.rigId).length;
    floor.clock.nowMs = Math.ceil(floor.clock.nowMs / 1000) * 1000;
    await hear();
    const before = await count();
    for (let times = 0; times < 4; times += 1) {
      floor.clock.pass(200);
      await hear();
    }
    expect(await count()).toBe(before);
    await report(floor, goodReport(floor, run.rigId, { workHold: true }));
    expect(await count()).toBe(before + 1);
    floor.clock.pass(1_000);
    await report(floor, goodReport(floor, run.rigId, { workHold: true }));
    expect(await count()).toBe(before + 2);
    await listener.close();
  });

  it('of a rig whose port is shut does not count as hearing it', async () => {
    const [, other] = floor.rigIds;
    await report(floor, goodReport(floor, other ?? '', { port: 'refused', portProblem: 'busy' }));
    const [row] = await floor.world.query('select connected_at from rig_reports where rig_id = $1', [other]);
    expect(row).toEqual({ connected_at: null });
  });

  it('of the very first kind is news', () => {
    expect(isNews(null, goodReport(floor, run.rigId), 0)).toBe(true);
  });
});

describe('an agent', () => {
  const headers = (over: Record<string, string> = {}) =>
    new Headers({ authorization: `Bearer ${floor.token}`, 'ellwand-protocol': '1', ...over });
  const enter = (sent: Headers) => authenticateAgent({ ctx: floor.system(), request: { headers: sent } });

  it('is known by its token, and refused with none, a wrong one and another version', async () => {
    expect(await enter(headers())).toMatchObject({ kind: 'agent', name: 'Bench' });
    await expect(enter(headers({ authorization: '' }))).rejects.toEqual(errorCode('token-refused'));
    const wrong = `Bearer ${floor.token.replace(/.$/, (last) => (last === 'A' ? 'B' : 'A'))}`;
    await expect(enter(headers({ authorization: wrong }))).rejects.toEqual(errorCode('token-refused'));
    await expect(enter(headers({ 'ellwand-protocol': '2' }))).rejects.toEqual(errorCode('protocol-unknown'));
  });

  it('that is too old, or says nothing of itself, is known and given neither rigs nor program', async () => {
    const enterFor = (software: Record<string, string>) =>
      authenticateRecentAgent({ ctx: floor.system(), request: { headers: headers(software) } });
    const newest = { 'ellwand-agent': `ellwand-agent ${LEAST_AGENT_VERSION}` };
    expect(await enterFor(newest)).toMatchObject({ name: 'Bench' });
    const tooOld: Record<string, string>[] = [{}, { 'ellwand-agent': 'ellwand-agent 0.1.9' }];
    for (const old of tooOld) {
      expect(await enter(headers(old))).toMatchObject({ name: 'Bench' });
      await expect(enterFor(old)).rejects.toEqual(errorCode('agent-too-old'));
    }
  });

  it('that speaks another version in what it sends is told so', async () => {
    const input = { protocol: 2, journalId: randomUUID(), events: [] };
    await expect(ingestEvents({ ctx: floor.agent(), input })).rejects.toEqual(errorCode('protocol-unknown'));
  });

  it('reads its own rigs and the program of a run on them, and no other', async () => {
    const { rigs } = await listBoundRigs({ ctx: floor.agent() });
    expect(rigs.map(({ rigId }) => rigId)).toEqual(floor.rigIds);
    const program = await readRunProgram({ ctx: floor.agent(), input: { runId: run.runId } });
    expect(program).toMatchObject({
      pieces: 5,
      lengthMm: 120,
      tag: 1,
      fence: rigs[0]?.fence,
      firstPieces: 5,
    });
    const foreign = floor.agent();
    const ctx = { ...foreign, actor: { ...foreign.actor, agentId: randomUUID() } };
    await expect(readRunProgram({ ctx, input: { runId: run.runId } })).rejects.toEqual(
      errorCode('not-found'),
    );
  });

  it('is refused from the moment its token is revoked', async () => {
    const { agentId } = floor.agent().actor;
    await revokeAgent({ ctx: await floor.as('owner'), input: { agentId } });
    await expect(enter(headers())).rejects.toEqual(errorCode('token-refused'));
  });
});
