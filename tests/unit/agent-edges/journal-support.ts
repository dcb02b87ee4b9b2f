import { randomUUID } from 'node:crypto';
import { cp, mkdtemp, readdir, rm, stat } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { onTestFinished } from 'vitest';
import { z } from 'zod';
import type { Damage } from '@/agent/journal/damage';
import { openJournal, type JournalOptions, type OpenedJournal } from '@/agent/journal/journal';
import type { JournalRecord } from '@/agent/journal/records';
import type { EventBody } from '@/lib/protocol/events';

export const noteSchema = z.discriminatedUnion('note', [
  z.object({ note: z.literal('mark'), value: z.number() }),
  z.object({ note: z.literal('snapshot'), value: z.number() }),
]);
export type TestNote = z.infer<typeof noteSchema>;

export const RIG = '5f0c1e5e-0c4b-4b8e-9c58-0f2f6f6c9a01';
export const NOON = new Date('2026-12-01T12:00:00.000Z');

/** An event that can be told apart from others by its number. */
export function said(number: number): EventBody {
  return { kind: 'firmware-said', rigId: RIG, text: `line ${number}` };
}

/** What was said in each record, as `event 1: line 5` or `mark 3`. */
export function plain(history: readonly JournalRecord<TestNote>[]): string[] {
  return history.map((record) => {
    if (record.type === 'note') return `${record.note.note} ${record.note.value}`;
    const { body, sequence } = record.event;
    return `event ${sequence}: ${body.kind === 'firmware-said' ? body.text : body.kind}`;
  });
}

/** A folder of its own, removed when the test has ended. */
export async function makeFolder(): Promise<string> {
  const folder = await mkdtemp(join(tmpdir(), 'ellwand-journal-'));
  onTestFinished(() => rm(folder, { recursive: true, force: true }));
  return folder;
}

export interface TestJournal extends OpenedJournal<TestNote> {
  told: Damage[];
}

export async function openAt(
  dir: string,
  options: Partial<JournalOptions<TestNote>> = {},
): Promise<TestJournal> {
  const told: Damage[] = [];
  const opened = await openJournal<TestNote>({
    dir,
    randomId: randomUUID,
    noteSchema,
    isSnapshot: (note) => note.note === 'snapshot',
    onDamage: (damage) => told.push(damage),
    ...options,
  });
  return { ...opened, told };
}

/** The newest segment of the newest journal in a folder. */
export async function newestSegment(dir: string): Promise<{ path: string; sizeBytes: number }> {
  const journals = (await readdir(dir)).filter((name) => name.startsWith('journal-')).sort();
  const folder = join(dir, journals.at(-1) ?? '');
  const segments = (await readdir(folder)).filter((name) => name.startsWith('segment-')).sort();
  const path = join(folder, segments.at(-1) ?? '');
  return { path, sizeBytes: (await stat(path)).size };
}

/** The folder as a kill at this moment leaves it, on a disk of its own: no lock of a living process. */
export async function afterKill(dir: string): Promise<string> {
  const copy = await makeFolder();
  await cp(dir, copy, { recursive: true });
  await rm(join(copy, 'lock'), { force: true });
  return copy;
}
