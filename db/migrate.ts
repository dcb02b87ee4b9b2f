import { drizzle } from 'drizzle-orm/node-postgres';
import { migrate } from 'drizzle-orm/node-postgres/migrator';
import { Client } from 'pg';

/** Brings the database at `url` to the newest schema. The lock lets two starts wait for each other. */
export async function migrateDatabase(url: string, migrationsFolder: string): Promise<void> {
  const client = new Client({ connectionString: url });
  await client.connect();
  try {
    await client.query('select pg_advisory_lock(732001)');
    await migrate(drizzle(client), { migrationsFolder });
  } finally {
    await client.end();
  }
}

/** The folder of migrations below a checkout. */
export function migrationsFolderOf(root: string): string {
  return `${root}/db/migrations`;
}
