import { readdir, readFile, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { eventUploadSchema } from '@/lib/protocol/events';
import { makeFolder, makeWorld, openJournalAt, openServer, said, testClock } from './uplink-support';

const EVENTS = '/api/agent/events';
const FAST = testClock({ speed: 10 });
const range = (from: number, to: number) => Array.from({ length: to - from + 1 }, (_, i) => from + i);
const lines = (numbers: number[]) => numbers.map((number) => `${number}: line ${number}`);

describe('the upload of events', () => {
  it('sends what is durable in order, in batches of at most 500, with token and protocol version', async () => {
    const { server, journal, uplink, append } = await makeWorld();
    await append(...range(1, 1200));
    uplink.start();
    await server.until(() => server.linesOf(journal.id).length === 1200);
    expect(server.linesOf(journal.id)).toEqual(lines(range(1, 1200)));
    const batches = server.to(EVENTS).map((heard) => eventUploadSchema.parse(heard.body).events.length);
    expect(Math.max(...batches)).toBe(500);
    for (const heard of server.to(EVENTS)) expect(heard.headers['ellwand-protocol']).toBe('1');
  });

  it('begins within 20 ms of an append', async () => {
    const { server, journal, uplink, append } = await makeWorld();
    uplink.start();
    await append(1);
    await server.until(() => server.linesOf(journal.id).length === 1);
    const delays: number[] = [];
    for (const number of range(2, 21)) {
      await append(number);
      const durableMs = performance.now();
      await server.until(() => server.linesOf(journal.id).length === number);
      delays.push((server.to(EVENTS).at(-1)?.atMs ?? Infinity) - durableMs);
    }
    // The median: a busy test machine may delay single ones.
    expect(delays.sort((a, b) => a - b)[10]).toBeLessThan(20);
  });

  it('stores each event once though the answer to every second upload is lost', async () => {
    const { server, journal, uplink, append } = await makeWorld({ clock: FAST });
    let uploads = 0;
    server.mishap = ({ path }) => (path === EVENTS && (uploads += 1) % 2 === 1 ? 'cut-after' : null);
    uplink.start();
    for (const number of range(1, 30)) await append(number);
    await server.until(() => server.linesOf(journal.id).length === 30 && journal.acknowledged === 30);
    expect(server.linesOf(journal.id)).toEqual(lines(range(1, 30)));
    expect(uploads).toBeGreaterThan(2);
  });

  it('keeps everything while the server is away, says so once, and sends it when the server is back', async () => {
    const { server, journal, uplink, notices, append } = await makeWorld({ clock: FAST });
    uplink.start();
    await append(1);
    await server.until(() => server.linesOf(journal.id).length === 1);
    await server.close();
    await append(...range(2, 50));
    await server.until(() =>
      notices.some(({ topic, code }) => topic === 'events' && code === 'service-away'),
    );
    await server.open();
    await server.until(() => server.linesOf(journal.id).length === 50);
    await server.until(() => notices.some(({ topic, code }) => topic === 'events' && code === null));
    expect(server.linesOf(journal.id)).toEqual(lines(range(1, 50)));
    expect(notices.filter(({ topic, code }) => topic === 'events' && code === 'service-away')).toHaveLength(
      1,
    );
  });

  it('sends again after a kill between storing and the noted acknowledgement, and nothing is doubled', async () => {
    const dir = await makeFolder();
    const server = await openServer();
    const first = await openJournalAt(dir);
    const at = new Date('2026-12-01T12:00:00.000Z');
    for (const number of [1, 2, 3]) await first.appendEvent(said(number), at);
    // As the killed process left it: stored by the server, not noted here.
    server.stored.set(first.id, [...(await first.eventsFrom(1, 3))]);
    await first.close();
    const { journal, uplink, append } = await makeWorld({ server, dir });
    expect(journal.acknowledged).toBe(0);
    uplink.start();
    await append(4);
    await server.until(() => server.linesOf(journal.id).length === 4);
    expect(server.linesOf(journal.id)).toEqual(lines([1, 2, 3, 4]));
  });

  it('does not send again what it noted as acknowledged before it stopped', async () => {
    const dir = await makeFolder();
    const server = await openServer();
    const first = await makeWorld({ server, dir });
    first.uplink.start();
    await first.append(1, 2);
    await server.until(
      () => first.journal.acknowledged === 2 || server.linesOf(first.journal.id).length === 2,
    );
    await first.uplink.close();
    await first.journal.acknowledge(2);
    await first.journal.close();
    const uploadsBefore = server.to(EVENTS).length;
    const again = await makeWorld({ server, dir });
    again.uplink.start();
    await again.append(3);
    await server.until(() => server.linesOf(again.journal.id).length === 3);
    const [next] = server.to(EVENTS).slice(uploadsBefore);
    expect(eventUploadSchema.parse(next?.body).events.map((event) => event.sequence)).toEqual([3]);
  });

  it('goes back to the number that the server expects after a gap', async () => {
    const { server, journal, uplink, append } = await makeWorld();
    await append(1, 2, 3, 4);
    // Noted as stored, but the server was put back to an older state.
    await journal.acknowledge(3);
    uplink.start();
    await server.until(() => server.linesOf(journal.id).length === 4);
    expect(server.linesOf(journal.id)).toEqual(lines([1, 2, 3, 4]));
    expect(server.to(EVENTS)).toHaveLength(2);
  });

  it('goes on behind what the server already has', async () => {
    const { server, journal, uplink, append } = await makeWorld();
    await append(1, 2, 3);
    server.stored.set(journal.id, [...(await journal.eventsFrom(1, 2))]);
    server.mishap = ({ path }) =>
      path === EVENTS && server.to(EVENTS).length === 0
        ? { refuse: 'journal-gap', details: { expected: 3 } }
        : null;
    uplink.start();
    await server.until(() => server.linesOf(journal.id).length === 3);
    const bodies = server.to(EVENTS).map((heard) => eventUploadSchema.parse(heard.body).events[0]?.sequence);
    expect(bodies).toEqual([1, 3]);
  });

  it('stops at other content under its numbers, says so loudly and keeps everything', async () => {
    const { server, journal, uplink, notices, append } = await makeWorld({ clock: FAST });
    await append(1, 2);
    const [event] = await journal.eventsFrom(1, 1);
    if (!event) throw new Error('the event is not in the journal');
    server.stored.set(journal.id, [{ ...event, body: said(99) }]);
    uplink.start();
    await server.until(() => notices.some(({ code }) => code === 'event-conflict'));
    await append(3);
    const reports = server.to('/api/agent/report').length;
    await server.until(() => server.to('/api/agent/report').length > reports + 3);
    expect(server.to(EVENTS)).toHaveLength(1);
    expect(await journal.eventsFrom(1, 10)).toHaveLength(3);
    expect(journal.acknowledged).toBe(0);
    const conflict = notices.find(({ code }) => code === 'event-conflict');
    expect(conflict?.text).toContain('STOPPED UPLOADING');
  });

  it('stops when the server holds more events of this journal than were ever written here', async () => {
    const { server, uplink, notices, append } = await makeWorld();
    server.mishap = ({ path }) => (path === EVENTS ? { answer: { storedThrough: 7 } } : null);
    await append(1);
    uplink.start();
    await server.until(() => notices.some(({ code }) => code === 'event-conflict'));
    expect(server.to(EVENTS)).toHaveLength(1);
  });

  it('says that the token is refused and tries again only rarely', async () => {
    const { server, uplink, notices, append } = await makeWorld({
      token: 'another-token-of-thirty-two-characters-and-more',
      clock: testClock({ speed: 30 }),
    });
    await append(1);
    uplink.start();
    await server.until(() =>
      notices.some(({ topic, code }) => topic === 'events' && code === 'token-refused'),
    );
    const sent = server.to(EVENTS).length;
    await server.until(() => server.to(EVENTS).length > sent);
    const [before, after] = server.to(EVENTS).slice(sent - 1);
    // 30 s and more on the agent's clock, which runs 30 times as fast.
    expect((after?.atMs ?? 0) - (before?.atMs ?? Infinity)).toBeGreaterThan(950);
  });

  it('says that the server speaks another version', async () => {
    const { server, uplink, notices, append } = await makeWorld();
    server.mishap = () => ({ refuse: 'protocol-unknown' });
    await append(1);
    uplink.start();
    await server.until(() => {
      const topics = notices.filter(({ code }) => code === 'protocol-unknown').map(({ topic }) => topic);
      return ['events', 'reports', 'commands'].every((topic) => topics.some((told) => told === topic));
    });
    expect(server.to(EVENTS)).toHaveLength(1);
  });

  it('sends a damaged journal’s readable events under the old id first, then those behind the gap', async () => {
    const dir = await makeFolder();
    const old = await openJournalAt(dir);
    const at = new Date('2026-12-01T12:00:00.000Z');
    for (const number of [1, 2, 3, 4, 5]) await old.appendEvent(said(number), at);
    await old.close();
    const folder = join(dir, (await readdir(dir)).find((name) => name.startsWith('journal-')) ?? '');
    const path = join(folder, (await readdir(folder)).find((name) => name.startsWith('segment-')) ?? '');
    await writeFile(path, (await readFile(path, 'utf8')).replace('line 3', 'line 8'));
    const { server, journal, uplink, append } = await makeWorld({ dir });
    uplink.start();
    await append(6);
    await server.until(() => server.linesOf(journal.id).length === 3);
    expect(server.linesOf(old.id)).toEqual(['1: line 1', '2: line 2']);
    expect(server.linesOf(journal.id)).toEqual(['1: line 4', '2: line 5', '3: line 6']);
  });
});
