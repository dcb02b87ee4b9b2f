import { execFile } from 'node:child_process';
import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { promisify } from 'node:util';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { repo } from '@/scripts/house/repo.mjs';

const run = promisify(execFile);
let folder = '';
let entry = '';

beforeAll(() => {
  // Below the repository, where the alias and the packages of an entry are found, in a folder that git ignores.
  mkdirSync(join(repo, '.next'), { recursive: true });
  folder = mkdtempSync(join(repo, '.next', 'run-'));
  entry = join(folder, 'probe.ts');
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

/** Writes the entry and a module that it imports. */
function write(word: string) {
  writeFileSync(join(folder, 'word.ts'), `export const word: string = '${word}';\n`);
  writeFileSync(
    entry,
    `import { ERRORS } from '@/lib/errors';\nimport { word } from './word';\n` +
      `console.log(JSON.stringify({ word, args: process.argv.slice(2), errors: 'not-found' in ERRORS }));\n`,
  );
}

async function answer(...args: string[]): Promise<unknown> {
  const { stdout } = await run(process.execPath, [join(repo, 'scripts/run.mjs'), entry, ...args], {
    cwd: repo,
  });
  return JSON.parse(stdout);
}

it('runs an entry with its arguments, with and without the dashes', async () => {
  write('one');
  expect(await answer('--', 'stop', '--config', 'x')).toEqual({
    word: 'one',
    args: ['stop', '--config', 'x'],
    errors: true,
  });
  expect(await answer('stop')).toEqual({ word: 'one', args: ['stop'], errors: true });
});

it('runs the newest sources, also when only an imported file has changed', async () => {
  write('two');
  expect(await answer()).toMatchObject({ word: 'two' });
});

it('runs in several processes at once while the bundle is stale', async () => {
  write('three');
  const answers = await Promise.all(Array.from({ length: 6 }, () => answer()));
  expect(answers).toEqual(Array.from({ length: 6 }, () => ({ word: 'three', args: [], errors: true })));
});
