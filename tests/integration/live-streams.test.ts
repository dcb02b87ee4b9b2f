import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { LiveHub } from '@/lib/live/hub';
import { type LiveMessage, liveMessageSchema } from '@/lib/schemas/floor';
import { type StreamLine, streamLineSchema } from '@/lib/protocol/commands';
import { revokeAgent } from '@/lib/services/agents/revoke-agent';
import { readLiveRigs } from '@/lib/services/floor/read-live-rigs';
import { readLiveWaiting } from '@/lib/services/floor/read-live-waiting';
import { followNews } from '@/lib/services/news/follow-news';
import { disablePerson } from '@/lib/services/people/disable-person';
import { findSessionActor } from '@/lib/services/people/find-session-actor';
import { authenticateAgent } from '@/lib/services/traffic/authenticate-agent';
import { issueCommand } from '@/lib/services/traffic/issue-command';
import { takeCommands } from '@/lib/services/traffic/take-commands';
import {
  cuts,
  type FloorWorld,
  goodReport,
  openFloorWorld,
  prepare,
  report,
  TestJournal,
} from '@/tests/support/floor-world';

let floor: FloorWorld;
let hub: LiveHub;
let run: Awaited<ReturnType<typeof prepare>>;
const closing = new AbortController();
let following: Promise<void>;
/** What the hub met that it could not answer; nothing, but where a test cuts its line. */
const failures: unknown[] = [];
/** Called each time the line to the database stands again. */
let onConnected: () => void = () => undefined;

beforeAll(async () => {
  floor = await openFloorWorld({ rigs: 2 });
  run = await prepare(floor, floor.rigIds[0] ?? '', 20);
  hub = new LiveHub({
    readRigs: (rigIds) => readLiveRigs({ ctx: floor.system(), rigIds }),
    readWaiting: () => readLiveWaiting({ ctx: floor.system() }),
    nowMs: () => floor.clock.nowMs,
    onFailed: (cause) => failures.push(cause),
  });
  await new Promise<void>((resolve) => {
    onConnected = resolve;
    following = followNews({
      ctx: floor.system(),
      databaseUrl: floor.world.url,
      closing: closing.signal,
      follower: {
        onNews: (news) => hub.take(news),
        onConnected: () => {
          hub.refresh();
          onConnected();
        },
        onLost: () => undefined,
      },
    });
  });
});
afterAll(async () => {
  closing.abort();
  await following;
  await floor.close();
});

/** Reads a stream message by message; `next` waits for one that fits. */
class Reader<Message> {
  #reader: ReadableStreamDefaultReader<Uint8Array>;
  #decoder = new TextDecoder();
  #text = '';

  constructor(
    body: ReadableStream<Uint8Array>,
    private readonly end: string,
    private readonly parse: (text: string) => Message,
  ) {
    this.#reader = body.getReader();
  }

  /** The next message that fits; null: the stream ended before. */
  async next(fits: (message: Message) => boolean = () => true): Promise<Message | null> {
    for (;;) {
      const at = this.#text.indexOf(this.end);
      if (at >= 0) {
        const message = this.parse(this.#text.slice(0, at));
        this.#text = this.#text.slice(at + this.end.length);
        if (fits(message)) return message;
        continue;
      }
      const { done, value } = await this.#reader.read();
      if (done) return null;
      this.#text += this.#decoder.decode(value, { stream: true });
    }
  }

  close = () => this.#reader.cancel();
}

function openAgent(token = floor.token): Reader<StreamLine> {
  const { actor } = floor.agent();
  const headers = new Headers({ authorization: `Bearer ${token}`, 'ellwand-protocol': '1' });
  const body = hub.openAgent({
    agentId: actor.agentId,
    takeCommands: (again) => takeCommands({ ctx: floor.agent(), again }),
    authenticate: () => authenticateAgent({ ctx: floor.system(), request: { headers } }),
    nowMs: () => floor.clock.nowMs,
    onFailed: (cause) => failures.push(cause),
  });
  return new Reader(body, '\n', (line) => streamLineSchema.parse(JSON.parse(line)));
}

function openBrowser(personId: string, epoch = 1): Reader<LiveMessage> {
  const session = { personId, epoch };
  const body = hub.openBrowser({
    personId,
    stands: async () => (await findSessionActor({ db: floor.world.db, session })) !== null,
    onFailed: (cause) => failures.push(cause),
  });
  return new Reader(body, '\n\n', (event) =>
    liveMessageSchema.parse(JSON.parse(event.replace(/^data: /, ''))),
  );
}

const personIdOf = async (role: 'operator' | 'maintainer') => (await floor.as(role)).actor.personId;
const stop = async () =>
  issueCommand(floor.system(), await personIdOf('operator'), {
    kind: 'stop',
    rigId: run.rigId,
    runId: run.runId,
  });
const isCommand = (id: string) => (line: StreamLine) => line.line === 'command' && line.command.id === id;

describe('an agent’s command stream', () => {
  it('begins with hello and what was asked before it opened', async () => {
    const before = await stop();
    const agent = openAgent();
    expect(await agent.next()).toMatchObject({ line: 'hello', protocol: 1 });
    expect(await agent.next(isCommand(before))).not.toBeNull();
    await agent.close();
  });

  it('brings a command within 300 ms of its commit', async () => {
    const agent = openAgent();
    await agent.next();
    const tookMs: number[] = [];
    for (let times = 0; times < 10; times += 1) {
      const id = await stop();
      const committedMs = performance.now();
      expect(await agent.next(isCommand(id))).not.toBeNull();
      tookMs.push(performance.now() - committedMs);
    }
    expect(Math.max(...tookMs)).toBeLessThan(300);
    await agent.close();
  });

  it('gives way to the agent’s next one, so that no command goes to a dead line', async () => {
    const first = openAgent();
    const second = openAgent();
    expect(await first.next(({ line }) => line === 'ping')).toBeNull();
    const id = await stop();
    expect(await second.next(isCommand(id))).not.toBeNull();
    await second.close();
  });

  it('is kept alive by pings', async () => {
    const agent = openAgent();
    hub.tick();
    expect(await agent.next(({ line }) => line === 'ping')).toMatchObject({ serverAt: floor.clock.iso() });
    await agent.close();
  });

  it('brings what was asked while the line to the database was cut', async () => {
    const agent = openAgent();
    await agent.next();
    const again = new Promise<void>((resolve) => (onConnected = resolve));
    await floor.world.query(
      `select pg_terminate_backend(pid) from pg_stat_activity where query like 'listen %' and datname = current_database()`,
    );
    const id = await stop();
    await again;
    expect(await agent.next(isCommand(id))).not.toBeNull();
    await agent.close();
  });
});

describe('a browser’s event stream', () => {
  it('shows a cut piece in the whole rig, as the rig is now', async () => {
    const browser = openBrowser(await personIdOf('operator'));
    expect(await browser.next()).toEqual({ kind: 'hello', at: floor.clock.iso() });
    await report(floor, goodReport(floor, run.rigId));
    await new TestJournal(floor).tell(...cuts(run, 1, 3));
    const shown = await browser.next((message) => message.kind === 'rig' && message.rig.run?.cut === 3);
    expect(shown).toMatchObject({ rig: { id: run.rigId, state: 'ready', run: { id: run.runId } } });
    await browser.close();
  });

  it('reads a rig once for all its readers', async () => {
    const people = [await personIdOf('operator'), await personIdOf('maintainer')];
    const browsers = people.map((personId) => openBrowser(personId));
    floor.clock.pass(1_000);
    await report(floor, goodReport(floor, run.rigId, { workHold: true }));
    const held = await Promise.all(
      browsers.map((browser) =>
        browser.next((message) => message.kind === 'rig' && message.rig.state === 'work hold'),
      ),
    );
    expect(held[0]).toEqual(held[1]);
    await Promise.all(browsers.map((browser) => browser.close()));
  });

  it('ends with a word when the person is shut out, and leaves the others open', async () => {
    const [leaver, stayer] = [await personIdOf('maintainer'), await personIdOf('operator')];
    const [left, kept] = [openBrowser(leaver), openBrowser(stayer)];
    await disablePerson({ ctx: await floor.as('owner'), input: { personId: leaver } });
    expect(await left.next(({ kind }) => kind === 'session-ended')).not.toBeNull();
    expect(await left.next()).toBeNull();
    hub.tick();
    expect(await kept.next(({ kind }) => kind === 'tick')).not.toBeNull();
    await kept.close();
  });
});

describe('all streams', () => {
  it('an agent’s ends when its token is revoked', async () => {
    const agent = openAgent();
    await revokeAgent({ ctx: await floor.as('owner'), input: { agentId: floor.agent().actor.agentId } });
    expect(await agent.next(({ line }) => line === 'ping')).toBeNull();
  });

  it('end when the process goes, and none opens after', async () => {
    const personId = await personIdOf('operator');
    const open = openBrowser(personId);
    hub.close();
    expect(await open.next(({ kind }) => kind === 'tick')).toBeNull();
    expect(await openBrowser(personId).next()).toBeNull();
    expect(failures).toEqual([]);
  });
});
