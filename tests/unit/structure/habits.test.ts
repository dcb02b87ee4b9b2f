import { existsSync } from 'node:fs';
import { join } from 'node:path';
import ts from 'typescript';
import { describe, expect, it } from 'vitest';
import { repo } from '@/scripts/house/repo.mjs';
import { filesIn, textOf, treeOf } from '@/tests/unit/structure/source';

const sources = filesIn('.', /\.(ts|tsx|mjs)$/);
/** The default data folder, which no clone has. */
const MADE_AT_START = '.data/';
const DOCUMENTS = ['README.md', 'DEVELOPERS.md'];

/** Whether a file does nothing but hand on what others export. */
function isBarrel(path: string): boolean {
  if (!/^export .*from /m.test(textOf(path))) return false;
  const { statements } = treeOf(path);
  return statements.length > 1 && statements.every((it) => ts.isExportDeclaration(it) && it.moduleSpecifier);
}

/** Paths in the code spans of a document: words with a slash, or with an ending of ours. */
function pathsIn(document: string): string[] {
  const spans = [...textOf(document).matchAll(/`([^`\n]+)`/g)].map((match) => match[1] ?? '');
  const links = [...textOf(document).matchAll(/\]\(([^)#\s]+)\)/g)].map((match) => match[1] ?? '');
  return [...spans, ...links].filter(
    (text) =>
      /^[\w.@()[\]-]+(\/[\w.@()[\]-]+)*\/?$/.test(text) && /\/|\.(ts|tsx|mjs|md|json|sql|css)$/.test(text),
  );
}

/** A path below the repository, or the bare name of some source file. */
function exists(path: string): boolean {
  return existsSync(join(repo, path)) || sources.some((source) => source.endsWith(`/${path}`));
}

describe('the habits of the house', () => {
  it('sees its own sources', () => {
    expect(sources).toContain('tests/unit/structure/habits.test.ts');
  });

  it('has no file that only hands on the exports of others', () => {
    expect(sources.filter(isBarrel)).toEqual([]);
  });

  it('calls nothing "utils", "helpers" or "common"', () => {
    const vague = /(^|\/)(utils?|helpers?|common|misc|shared)(\/|\.|$)/i;
    expect(sources.filter((path) => vague.test(path))).toEqual([]);
  });

  it('switches no check off from inside a file', () => {
    // Written in two parts so that this file does not find itself.
    const banned = ['eslint-' + 'disable', '@ts-' + 'ignore', '@ts-' + 'nocheck', '@ts-' + 'expect-error'];
    const found = sources.filter((path) => banned.some((word) => textOf(path).includes(word)));
    expect(found).toEqual([]);
  });

  it('leaves no work undone in a comment', () => {
    const mark = new RegExp(`\\b(${['TO' + 'DO', 'FIX' + 'ME', 'X' + 'XX', 'HA' + 'CK'].join('|')})\\b`);
    expect(sources.filter((path) => mark.test(textOf(path)))).toEqual([]);
  });

  it.each(DOCUMENTS)('cites only paths that exist in %s', (document) => {
    const missing = pathsIn(document).filter((path) => path !== MADE_AT_START && !exists(path));
    expect(missing).toEqual([]);
  });

  it('skips no test and runs none alone', () => {
    const focus = /\b(it|test|describe)\.(skip|only|todo)\b/;
    const tests = sources.filter((path) => path.startsWith('tests/') && /\.test\.tsx?$/.test(path));
    expect(tests.filter((path) => focus.test(textOf(path)))).toEqual([]);
  });
});
