import { mkdir, open, readdir, rename, rm } from 'node:fs/promises';
import { join } from 'node:path';
import { encodeCheckedLine } from './checked-line';
import { syncFolder, writeDurably } from './durable-file';
import type { SegmentHead } from './records';

const SEGMENT = /^segment-(\d{8})$/;
const GENERATION = /^journal-(\d{6})$/;
/** A generation that was being written when the process died: worthless, its source is still there. */
const UNFINISHED = '.unfinished';

export interface Numbered {
  number: number;
  path: string;
}

/** The segments of one journal, oldest first. */
export function listSegments(folder: string): Promise<Numbered[]> {
  return listNumbered(folder, SEGMENT);
}

/** The journals of one agent, oldest first: a damaged one is followed by its successor and never removed. */
export function listGenerations(dir: string): Promise<Numbered[]> {
  return listNumbered(dir, GENERATION);
}

async function listNumbered(folder: string, pattern: RegExp): Promise<Numbered[]> {
  const found: Numbered[] = [];
  for (const name of await readdir(folder)) {
    const digits = pattern.exec(name)?.[1];
    if (digits) found.push({ number: Number(digits), path: join(folder, name) });
  }
  return found.sort((a, b) => a.number - b.number);
}

export function segmentPath(folder: string, number: number): string {
  return join(folder, `segment-${String(number).padStart(8, '0')}`);
}

/** Creates a segment that already holds its head; any crash leaves either all of that or nothing. */
export async function createSegment(folder: string, head: SegmentHead): Promise<OpenSegment> {
  const line = encodeCheckedLine(head);
  const path = segmentPath(folder, head.segment);
  await writeDurably(path, line);
  return { number: head.segment, path, sizeBytes: line.length, handle: await open(path, 'r+') };
}

/** What the journal needs of an open file. */
export interface SegmentHandle {
  write(bytes: Buffer, offset: number, length: number, position: number): Promise<{ bytesWritten: number }>;
  datasync(): Promise<void>;
  truncate(length: number): Promise<void>;
  close(): Promise<void>;
}

/** The segment that is being written; `sizeBytes` counts only what is synced. */
export interface OpenSegment extends Numbered {
  sizeBytes: number;
  handle: SegmentHandle;
}

/**
 * Creates the journal `number` in one step, its first segment holding `lines` (the head first).
 * @returns its folder
 */
export async function createGeneration(dir: string, number: number, lines: unknown[]): Promise<string> {
  const folder = join(dir, `journal-${String(number).padStart(6, '0')}`);
  const draft = `${folder}${UNFINISHED}`;
  await rm(draft, { recursive: true, force: true });
  await mkdir(draft);
  await writeDurably(segmentPath(draft, 1), Buffer.concat(lines.map(encodeCheckedLine)));
  await rename(draft, folder);
  await syncFolder(dir);
  return folder;
}
