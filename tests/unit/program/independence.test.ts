import { readFileSync } from 'node:fs';
import { dirname, join, relative } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';

const room = fileURLToPath(new URL('../../../lib/program/', import.meta.url));

/** Every file that `file` leads to by imports, itself included, relative to the room; packages are left out. */
function reached(file: string, seen = new Set<string>()): Set<string> {
  const name = relative(room, file);
  if (seen.has(name)) return seen;
  seen.add(name);
  const source = readFileSync(file, 'utf8');
  for (const [, from = ''] of source.matchAll(/(?:from|import)\s*\(?\s*'([^']+)'/g)) {
    const base = from.startsWith('@/') ? join(room, '../..', from.slice(2)) : join(dirname(file), from);
    if (from.startsWith('.') || from.startsWith('@/')) reached(`${base}.ts`, seen);
  }
  return seen;
}

describe('the reader and the generator', () => {
  const generator = reached(join(room, 'generate.ts'));
  const reader = reached(join(room, 'check.ts'));

  it('share no file but the contracts', () => {
    const shared = [...generator].filter((file) => reader.has(file));
    expect(shared).toEqual(['profile.ts']);
  });

  it('are both followed to their ends, so that the comparison says something', () => {
    expect([...generator]).toEqual(expect.arrayContaining(['parts.ts', 'feed-moves.ts', 'motion.ts']));
    expect([...reader]).toEqual(
      expect.arrayContaining(['read.ts', 'steps.ts', 'reading/lex.ts', 'reading/limits.ts']),
    );
  });
});
