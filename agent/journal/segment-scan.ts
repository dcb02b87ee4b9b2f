import type { z } from 'zod';
import { decodeCheckedLine } from './checked-line';
import { parseStoredRecord, segmentHeadSchema, type SegmentHead, type StoredRecord } from './records';

const NEWLINE = 0x0a;
const NUL = 0;

export type LineFault = 'unreadable' | 'unknown-record';

export interface SegmentScan<Note> {
  /** null: the first line is no head, which is a fault of its own. */
  head: SegmentHead | null;
  /** In file order; `offset` is the byte at which the line begins. */
  lines: { offset: number; record: StoredRecord<Note> }[];
  faults: { offset: number; fault: LineFault }[];
  /** From this byte on there is only what an interrupted write leaves behind; null: the file ends well. */
  tornAt: number | null;
}

/**
 * Reads the bytes of one segment. What an interrupted write leaves (an unfinished line, blocks of zeros) counts as
 * torn only at the very end; anything else that does not read is a fault.
 */
export function scanSegment<Note>(bytes: Buffer, noteSchema: z.ZodType<Note>): SegmentScan<Note> {
  const scan: SegmentScan<Note> = { head: null, lines: [], faults: [], tornAt: null };
  let offset = 0;
  let lastGoodEnd = 0;
  for (let end = bytes.indexOf(NEWLINE); end !== -1; end = bytes.indexOf(NEWLINE, offset)) {
    const fault = takeLine(scan, bytes.subarray(offset, end), offset, noteSchema);
    if (fault) scan.faults.push({ offset, fault });
    else lastGoodEnd = end + 1;
    offset = end + 1;
  }
  if (bytes.subarray(lastGoodEnd).includes(NUL)) {
    scan.faults = scan.faults.filter((fault) => fault.offset < lastGoodEnd);
    scan.tornAt = lastGoodEnd;
  } else if (offset < bytes.length) {
    scan.tornAt = offset;
  }
  return scan;
}

function takeLine<Note>(
  scan: SegmentScan<Note>,
  line: Buffer,
  offset: number,
  noteSchema: z.ZodType<Note>,
): LineFault | null {
  const value = decodeCheckedLine(line);
  if (typeof value === 'symbol') return 'unreadable';
  if (offset === 0) {
    const head = segmentHeadSchema.safeParse(value);
    if (head.success) scan.head = head.data;
    return head.success ? null : 'unknown-record';
  }
  const record = parseStoredRecord(value, noteSchema);
  if (!record) return 'unknown-record';
  scan.lines.push({ offset, record });
  return null;
}
