import { fstatSync } from 'node:fs';
import type { LOG_FORMATS, LogFormat } from '@/agent/log';

const STDOUT = 1;

/** How to write to standard output, by what it is: a terminal, the system's journal, or anything else. */
export function logFormatFor(wanted: (typeof LOG_FORMATS)[number]): LogFormat {
  if (wanted !== 'auto') return wanted;
  if (process.stdout.isTTY) return 'text';
  return isJournal(process.env.JOURNAL_STREAM) ? 'journal' : 'json';
}

/** systemd names device and inode of the stream that it gave; a redirected output is another one (systemd.exec(5)). */
function isJournal(stream: string | undefined): boolean {
  const { dev, ino } = fstatSync(STDOUT);
  return stream === `${dev}:${ino}`;
}
