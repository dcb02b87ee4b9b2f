import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { readFile, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { makeFolder, openAt } from './journal-support';

describe('the lock on a journal’s folder', () => {
  it('lets one process at a time work in it', async () => {
    const dir = await makeFolder();
    const { journal } = await openAt(dir);
    await expect(openAt(dir)).rejects.toMatchObject({ code: 'journal-locked' });
    await journal.close();
    const again = await openAt(dir);
    await again.journal.close();
  });

  it('is not taken from another living process', async () => {
    const dir = await makeFolder();
    const other = spawn(process.execPath, ['-e', 'process.stdin.resume()'], {
      stdio: ['pipe', 'ignore', 'ignore'],
    });
    await once(other, 'spawn');
    const stat = await readFile(`/proc/${other.pid}/stat`, 'utf8');
    const startedAt = stat.slice(stat.lastIndexOf(')') + 2).split(' ')[19];
    await writeFile(join(dir, 'lock'), JSON.stringify({ pid: other.pid, startedAt }));
    await expect(openAt(dir)).rejects.toMatchObject({ code: 'journal-locked' });
    other.stdin.end();
    await once(other, 'exit');
    const { journal } = await openAt(dir);
    await journal.close();
  });

  it.each([
    ['a process that only bears the same number', JSON.stringify({ pid: process.pid, startedAt: '1' })],
    ['a crash that left half a lock', '{"pid":'],
  ])('is taken over from %s', async (_what, content) => {
    const dir = await makeFolder();
    await writeFile(join(dir, 'lock'), content);
    const { journal } = await openAt(dir);
    await journal.close();
  });
});
