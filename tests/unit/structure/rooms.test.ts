import { readdirSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { repo } from '@/scripts/house/repo.mjs';
import { complaintsAbout, importOf } from '@/tests/unit/structure/lint';

/** Rooms from the top down as the design draws them, written here a second time and not read from the rule. */
const PURE = ['wire', 'program', 'fleet', 'protocol', 'schemas', 'quality'].map((name) => `lib/${name}`);
const ALL = [
  'app',
  'components',
  'db',
  'agent',
  'lib/services',
  'lib/queries',
  'lib/jobs',
  'lib/auth',
  'lib/http',
  'lib/live',
  'lib/env',
  ...PURE,
];
const MAY_KNOW: Record<string, string[]> = {
  app: ['components', 'lib/services', 'lib/queries', 'lib/auth', 'lib/http', 'lib/live', 'lib/env', ...PURE],
  components: ['lib/queries', ...PURE],
  'lib/queries': PURE,
  'lib/jobs': ['lib/services', 'lib/env', ...PURE],
  'lib/http': ['lib/auth', 'lib/services', 'lib/live', 'lib/env', ...PURE],
  'lib/live': ['lib/auth', 'lib/services', 'lib/env', ...PURE],
  'lib/auth': ['db', 'lib/services', 'lib/env', ...PURE],
  'lib/services': ['db', 'lib/env', ...PURE],
  db: ['lib/env', ...PURE],
  agent: PURE,
  'lib/env': PURE,
  ...Object.fromEntries(PURE.map((room) => [room, PURE])),
};

const pairs = Object.keys(MAY_KNOW).flatMap((from) =>
  ALL.filter((to) => to !== from).map((to) => ({ from, to })),
);
const allowed = pairs.filter(({ from, to }) => MAY_KNOW[from]?.includes(to));
const forbidden = pairs.filter(({ from, to }) => !MAY_KNOW[from]?.includes(to));

describe('the directions between rooms', () => {
  it.each(forbidden)('forbids $from to import from $to', async ({ from, to }) => {
    const code = `import * as it from '${importOf(to)}';\nexport const got = it;\n`;
    expect(await complaintsAbout(code, `${from}/snippet.ts`)).toContain('import-x/no-restricted-paths');
  });

  it.each(allowed)('lets $from import from $to', async ({ from, to }) => {
    const code = `import * as it from '${importOf(to)}';\nexport const got = it;\n`;
    expect(await complaintsAbout(code, `${from}/snippet.ts`)).toEqual([]);
  });

  it.each([
    {
      how: 'a type',
      code: (path: string) => `import type * as It from '${path}';\nexport type Got = typeof It;\n`,
    },
    { how: 'an export', code: (path: string) => `export * from '${path}';\n` },
    { how: 'a late import', code: (path: string) => `export const late = () => import('${path}');\n` },
  ])('forbids a wrong direction also as $how', async ({ code }) => {
    const complaints = await complaintsAbout(code(importOf('db')), 'lib/wire/snippet.ts');
    expect(complaints).toContain('import-x/no-restricted-paths');
  });

  it('keeps the virtual rig and the agent from reading each other', async () => {
    const rest = importOf('agent', 'virtual');
    const virtual = importOf('agent/virtual');
    for (const [path, file] of [
      [rest, 'agent/virtual/snippet.ts'],
      [virtual, 'agent/runner/snippet.ts'],
    ] as const) {
      expect(await complaintsAbout(`export * from '${path}';\n`, file)).toEqual([
        'import-x/no-restricted-paths',
      ]);
    }
  });

  it('lets the seed use services, which the rest of db may not', async () => {
    const code = `export * from '${importOf('lib/services')}';\n`;
    expect(await complaintsAbout(code, 'db/seed/snippet.ts')).toEqual([]);
    expect(await complaintsAbout(code, 'db/snippet.ts')).toEqual(['import-x/no-restricted-paths']);
  });

  it('knows every folder of lib, so that a new one cannot escape the rules', () => {
    const known = ['plan', 'wear', 'services', 'queries', 'jobs', 'auth', 'http', 'env', 'live'];
    const files = readdirSync(join(repo, 'lib'), { recursive: true, encoding: 'utf8' });
    const folders = new Set(
      files.filter((file) => /.\/.+\.tsx?$/.test(file)).map((file) => file.split('/')[0] ?? ''),
    );
    const unknown = [...folders].filter((name) => !known.includes(name) && !PURE.includes(`lib/${name}`));
    expect(unknown).toEqual([]);
  });
});
