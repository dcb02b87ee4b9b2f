import { randomUUID } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import type { Command } from '@/lib/protocol/commands';
import { makeWorld, RIG, testClock, type World } from './uplink-support';

const COMMANDS = '/api/agent/commands';
const FAST = testClock({ speed: 10 });

function command(kind: 'pause' | 'stop' = 'pause'): Command {
  return {
    kind,
    id: randomUUID(),
    rigId: RIG,
    runId: randomUUID(),
    personId: randomUUID(),
    fence: 1,
    issuedAt: '2026-12-01T12:00:00.000Z',
  };
}

/** Starts the uplink and gathers the commands it gives out; resolves once the stream is open. */
async function listening(world: World): Promise<Command[]> {
  const taken: Command[] = [];
  world.uplink.onCommand((given) => {
    taken.push(given);
    world.server.changed();
  });
  world.uplink.start();
  await world.server.until(() => world.server.streams.length === 1);
  return taken;
}

const line = (given: Command) => `${JSON.stringify({ line: 'command', command: given })}\n`;
const answerPath = (id: string) => `${COMMANDS}/${id}/answer`;

describe('the command stream', () => {
  it('gives out commands in order wherever the bytes are split', async () => {
    const world = await makeWorld();
    const taken = await listening(world);
    const commands = [command(), command('stop'), command()];
    const bytes = Buffer.from(
      commands
        .map((given) => `${JSON.stringify({ line: 'command', note: 'naïve – ✂', command: given })}\r\n`)
        .join(''),
    );
    for (const byte of bytes) {
      const [stream] = world.server.streams;
      await new Promise((resolve) => stream?.write(Buffer.from([byte]), resolve));
    }
    await world.server.until(() => taken.length === 3);
    expect(taken).toEqual(commands);
  });

  it('is opened again at once when it ends', async () => {
    const world = await makeWorld({ clock: FAST });
    const taken = await listening(world);
    // Longer open than a stream that fails right away: 1 s on the agent's clock.
    const openedMs = performance.now();
    await world.server.until(() => performance.now() - openedMs > 120);
    world.server.streams[0]?.end();
    const endedMs = performance.now();
    await world.server.until(() => world.server.streams.length === 2);
    expect(performance.now() - endedMs).toBeLessThan(250);
    const given = command();
    world.server.streams[1]?.write(line(given));
    await world.server.until(() => taken.length === 1);
    expect(taken).toEqual([given]);
  });

  it('is taken for dead after three missed pings, and lives while pings come', async () => {
    const world = await makeWorld({ clock: testClock({ speed: 8 }) });
    await listening(world);
    const openedMs = performance.now();
    const [first] = world.server.streams;
    const ping = () =>
      first?.write(`${JSON.stringify({ line: 'ping', serverAt: new Date().toISOString() })}\n`);
    // Pings for twice the silence that would end it; then silence.
    const pinging = setInterval(ping, 100);
    await world.server.until(() => performance.now() - openedMs > 1_500);
    clearInterval(pinging);
    expect(world.server.streams).toHaveLength(1);
    await world.server.until(() => world.server.streams.length === 2);
    expect(performance.now() - openedMs).toBeGreaterThan(2_100);
    expect(world.notices).toContainEqual(
      expect.objectContaining({ topic: 'commands', code: 'service-away' }),
    );
  });

  it('survives lines that are no JSON, unknown or too long, and reads the next one', async () => {
    const world = await makeWorld();
    const taken = await listening(world);
    const given = command();
    const [stream] = world.server.streams;
    stream?.write('half a line{\n\n{"line":"weather"}\n');
    stream?.write(`{"line":"ping","serverAt":"${'x'.repeat(200_000)}"}\n`);
    stream?.write(line(given));
    await world.server.until(() => taken.length === 1);
    expect(taken).toEqual([given]);
    expect(world.notices.filter(({ code }) => code === 'bad-input')).toHaveLength(3);
  });

  it('answers a command it does not know, or that is not whole, with a refusal', async () => {
    const world = await makeWorld();
    const taken = await listening(world);
    const unknown = { ...command(), kind: 'dance' };
    const { runId: _left, ...halfCommand } = { ...command(), runId: '' };
    for (const given of [unknown, halfCommand]) {
      world.server.streams[0]?.write(`${JSON.stringify({ line: 'command', command: given })}\n`);
    }
    const answers = () => world.server.heard.filter(({ path }) => path.endsWith('/answer'));
    await world.server.until(() => answers().length === 2);
    const codeOf = (id: string) => answers().find(({ path }) => path === answerPath(id))?.body;
    expect(codeOf(unknown.id)).toMatchObject({ outcome: 'refused', code: 'protocol-unknown' });
    expect(codeOf(halfCommand.id)).toMatchObject({ outcome: 'refused', code: 'bad-input' });
    expect(taken).toEqual([]);
  });

  it('leaves a server alone that speaks another version, and says so', async () => {
    const world = await makeWorld({ clock: testClock({ speed: 30 }) });
    world.server.protocol = 2;
    world.uplink.start();
    const told = () =>
      world.notices.some(({ topic, code }) => topic === 'commands' && code === 'protocol-unknown');
    await world.server.until(told);
    const opened = world.server.to(COMMANDS).length;
    await world.server.until(() => world.server.to(COMMANDS).length > opened);
    const [before, after] = world.server.to(COMMANDS).slice(opened - 1);
    // 30 s and more on the agent's clock, which runs 30 times as fast.
    expect((after?.atMs ?? 0) - (before?.atMs ?? Infinity)).toBeGreaterThan(950);
  });
});

describe('answers to commands', () => {
  const done = { outcome: 'done', at: '2026-12-01T12:00:00.000Z' } as const;

  it('are sent until the server takes them', async () => {
    const world = await makeWorld({ clock: FAST });
    let calls = 0;
    world.server.mishap = ({ path }) => {
      if (!path.endsWith('/answer')) return null;
      calls += 1;
      if (calls === 1) return 'cut-before';
      if (calls === 2) return { refuse: 'service-away' };
      return calls === 3 ? 'cut-after' : null;
    };
    const taken = await listening(world);
    const given = command();
    world.server.streams[0]?.write(line(given));
    await world.server.until(() => taken.length === 1);
    world.uplink.answer(given.id, done);
    await world.server.until(() =>
      world.notices.some(({ topic, code }) => topic === 'answers' && code === null),
    );
    const answers = world.server.to(answerPath(given.id));
    expect(answers).toHaveLength(4);
    for (const answer of answers) expect(answer.body).toEqual(done);
  });

  it('are dropped when the server says that it knows no such command', async () => {
    const world = await makeWorld({ clock: FAST });
    world.server.mishap = ({ path }) => (path.endsWith('/answer') ? { refuse: 'not-found' } : null);
    await listening(world);
    const id = randomUUID();
    world.uplink.answer(id, done);
    await world.server.until(() => world.notices.some(({ topic }) => topic === 'answers'));
    const reports = world.server.to('/api/agent/report').length;
    await world.server.until(() => world.server.to('/api/agent/report').length > reports + 3);
    expect(world.server.to(answerPath(id))).toHaveLength(1);
  });

  it('keep a repeated command from being given out while they are on their way, and not later', async () => {
    const world = await makeWorld();
    const taken = await listening(world);
    const first = command();
    const second = command();
    const write = (given: Command) => world.server.streams[0]?.write(line(given));
    for (const given of [first, first, second]) write(given);
    await world.server.until(() => taken.length === 2);
    expect(taken).toEqual([first, second]);
    world.uplink.answer(first.id, done);
    // A second answer to the same command does not contradict the first.
    world.uplink.answer(first.id, { ...done, outcome: 'refused', code: 'command-replayed' });
    await world.server.until(() => world.server.to(answerPath(first.id)).length === 1);
    expect(world.server.to(answerPath(first.id))[0]?.body).toEqual(done);
    const reports = world.server.to('/api/agent/report').length;
    await world.server.until(() => world.server.to('/api/agent/report').length > reports);
    write(first);
    await world.server.until(() => taken.length === 3);
    expect(taken[2]).toEqual(first);
    world.uplink.answer(first.id, { ...done, outcome: 'refused', code: 'command-replayed' });
    await world.server.until(() => world.server.to(answerPath(first.id)).length === 2);
    expect(world.server.to(answerPath(first.id))[1]?.body).toMatchObject({ code: 'command-replayed' });
  });
});
