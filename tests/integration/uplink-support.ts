import { randomUUID } from 'node:crypto';
import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach } from 'vitest';
import { z } from 'zod';
import type { Clock } from '@/agent/clock';
import type { Journal } from '@/agent/journal/contract';
import { openJournal } from '@/agent/journal/journal';
import type { Notice } from '@/agent/uplink/notices';
import { createUplink, type Uplink } from '@/agent/uplink/uplink';
import type { EventBody } from '@/lib/protocol/events';
import { TestServer, TOKEN } from './uplink-server';

const noteSchema = z.object({ note: z.string() });
type TestNote = z.infer<typeof noteSchema>;

export const RIG = '5f0c1e5e-0c4b-4b8e-9c58-0f2f6f6c9a01';

export function said(number: number): EventBody {
  return { kind: 'firmware-said', rigId: RIG, text: `line ${number}` };
}

/** A clock on which everything waits `speed` times shorter, and whose wall time is `aheadMs` off. */
export function testClock({ speed = 1, aheadMs = 0 } = {}): Clock {
  return {
    date: () => new Date(Date.now() + aheadMs),
    nowMs: () => performance.now() * speed,
    after(ms, call) {
      const timer = setTimeout(call, ms / speed);
      return () => clearTimeout(timer);
    },
  };
}

export interface World {
  server: TestServer;
  dir: string;
  journal: Journal<TestNote>;
  uplink: Uplink;
  notices: Notice[];
  append(...numbers: number[]): Promise<void>;
}

const closers: (() => Promise<void>)[] = [];

afterEach(async () => {
  for (const close of closers.splice(0).reverse()) await close();
});

export async function openServer(): Promise<TestServer> {
  const server = new TestServer();
  await server.open();
  closers.push(() => server.close());
  return server;
}

export async function makeFolder(): Promise<string> {
  const folder = await mkdtemp(join(tmpdir(), 'ellwand-uplink-'));
  closers.push(() => rm(folder, { recursive: true, force: true }));
  return folder;
}

export async function openJournalAt(dir: string): Promise<Journal<TestNote>> {
  const { journal } = await openJournal({ dir, randomId: randomUUID, noteSchema, onDamage: () => undefined });
  return journal;
}

interface Given {
  server?: TestServer;
  dir?: string;
  clock?: Clock;
  token?: string;
}

/** An agent's edges with a real journal, not yet started, towards a server of this test. */
export async function makeWorld(given: Given = {}): Promise<World> {
  const server = given.server ?? (await openServer());
  const dir = given.dir ?? (await makeFolder());
  const journal = await openJournalAt(dir);
  const notices: Notice[] = [];
  const uplink = createUplink({
    server: server.address,
    token: given.token ?? TOKEN,
    journal,
    software: 'ellwand-agent test',
    clock: given.clock ?? testClock(),
    random: () => 0.5,
    fetch,
    say: (notice) => {
      notices.push(notice);
      server.changed();
    },
  });
  closers.push(async () => {
    await uplink.close();
    await journal.close();
  });
  const at = new Date('2026-12-01T12:00:00.000Z');
  return {
    server,
    dir,
    journal,
    uplink,
    notices,
    async append(...numbers) {
      await Promise.all(numbers.map((number) => journal.appendEvent(said(number), at)));
    },
  };
}
