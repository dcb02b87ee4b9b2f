/** `db/seed/main.ts [--no-demo]`: the first data of an instance; run at every start, changes nothing but once. */
import { openDatabase } from '@/db/client';
import { seedEnv } from '@/lib/env/seed';
import { refreshDemoFiles } from './files';
import { seedDemo } from './seed';

async function main(args: readonly string[]): Promise<void> {
  const unknown = args.find((arg) => arg !== '--no-demo');
  if (unknown) throw new Error(`There is no option ${unknown}. Known: --no-demo`);
  const env = seedEnv();
  if (args.includes('--no-demo')) {
    refreshDemoFiles(env);
    return;
  }
  const { db, pool } = openDatabase(env.databaseUrl, { connectionsMax: 1 });
  try {
    const filled = await seedDemo(db, env, new Date());
    if (filled) console.log('An empty database was filled with the demo workshop');
  } finally {
    await pool.end();
  }
}

await main(process.argv.slice(2));
