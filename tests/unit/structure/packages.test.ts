import { describe, expect, it } from 'vitest';
import { complaintsAbout } from '@/tests/unit/structure/lint';

const IMPORTS = ['no-restricted-imports'];

/** Packages by the rooms that must not know them. */
const FORBIDDEN = [
  { name: 'bullmq', rooms: ['app', 'components', 'lib/services', 'lib/auth', 'lib/http', 'agent', 'db'] },
  { name: 'ioredis', rooms: ['app', 'components', 'lib/services', 'lib/auth', 'lib/http', 'agent', 'db'] },
  { name: 'drizzle-orm', rooms: ['app', 'components', 'lib/jobs', 'lib/http', 'lib/queries', 'agent'] },
  { name: 'pg', rooms: ['app', 'components', 'lib/jobs', 'lib/http', 'lib/queries', 'agent'] },
  { name: 'serialport', rooms: ['app', 'components', 'lib/services', 'lib/jobs', 'db', 'agent/virtual'] },
  { name: 'next/server', rooms: ['lib/services', 'lib/jobs', 'db', 'agent', 'lib/queries'] },
  { name: 'react', rooms: ['lib/services', 'lib/jobs', 'db', 'agent'] },
  { name: 'node:fs', rooms: ['components', 'lib/queries', 'lib/env'] },
];
const pairs = FORBIDDEN.flatMap(({ name, rooms }) => rooms.map((room) => ({ name, room })));

describe('packages', () => {
  it.each(pairs)('forbids $name in $room', async ({ name, room }) => {
    expect(await complaintsAbout(`export * from '${name}';\n`, `${room}/snippet.ts`)).toEqual(IMPORTS);
  });

  it.each(pairs)('forbids $name in $room also when imported late', async ({ name, room }) => {
    const code = `export const late = () => import('${name}');\n`;
    expect(await complaintsAbout(code, `${room}/snippet.ts`)).toEqual(['no-restricted-syntax']);
  });

  it.each([
    'node:fs',
    'fs',
    'crypto',
    'next',
    'react',
    'drizzle-orm',
    'bullmq',
    'ioredis',
    'pg',
    'serialport',
    'csv-parse',
  ])('forbids %s in every pure room', async (name) => {
    for (const room of [
      'lib/wire',
      'lib/program',
      'lib/fleet',
      'lib/plan',
      'lib/wear',
      'lib/quality',
      'lib/protocol',
    ]) {
      expect(await complaintsAbout(`export * from '${name}';\n`, `${room}/snippet.ts`)).toEqual(IMPORTS);
    }
    expect(await complaintsAbout(`export * from '${name}';\n`, 'lib/snippet.ts')).toEqual(IMPORTS);
  });

  it.each([
    { name: 'zod', room: 'lib/wire' },
    { name: 'bullmq', room: 'lib/jobs' },
    { name: 'ioredis', room: 'lib/jobs' },
    { name: 'drizzle-orm', room: 'lib/services' },
    { name: 'serialport', room: 'agent' },
    { name: 'node:fs', room: 'agent' },
    { name: '@tanstack/react-query', room: 'lib/queries' },
    { name: 'next/navigation', room: 'app' },
  ])('lets $room import $name', async ({ name, room }) => {
    expect(await complaintsAbout(`export * from '${name}';\n`, `${room}/snippet.ts`)).toEqual([]);
  });
});

describe('time, chance and the environment', () => {
  const SYNTAX = ['no-restricted-syntax'];

  it.each(['Date.now()', 'new Date()', 'Math.random()', 'Date()'])(
    'forbids %s in a pure room',
    async (code) => {
      expect(await complaintsAbout(`export const it = ${code};\n`, 'lib/plan/snippet.ts')).not.toEqual([]);
    },
  );

  it('lets a pure room make a date of what it was given', async () => {
    const code = 'export const at = (ms: number) => new Date(ms);\n';
    expect(await complaintsAbout(code, 'lib/plan/snippet.ts')).toEqual([]);
  });

  it.each(['fetch', 'setTimeout', 'console', 'process', 'Buffer'])(
    'forbids %s in a pure room',
    async (name) => {
      const code = `export const it = ${name};\n`;
      expect(await complaintsAbout(code, 'lib/fleet/snippet.ts')).toEqual(['no-restricted-globals']);
    },
  );

  it.each([
    'app',
    'components',
    'db',
    'lib/services',
    'lib/jobs',
    'lib/auth',
    'lib/http',
    'agent',
    'agent/virtual',
  ])('forbids %s to read the environment', async (room) => {
    const file = `${room}/snippet.ts`;
    expect(await complaintsAbout('export const it = process.env.HOME;\n', file)).toEqual(SYNTAX);
    expect(await complaintsAbout('const { env } = process;\nexport const it = env;\n', file)).toEqual(SYNTAX);
    expect(await complaintsAbout("export { env } from 'node:process';\n", file)).not.toEqual([]);
  });

  it.each(['lib/env/snippet.ts', 'agent/config.ts', 'scripts/snippet.ts', 'snippet.config.ts'])(
    'lets %s read it',
    async (file) => {
      expect(await complaintsAbout('export const it = process.env.HOME;\n', file)).toEqual([]);
    },
  );
});
