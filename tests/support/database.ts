import { randomBytes } from 'node:crypto';
import pg from 'pg';
import { TEMPLATE, databaseUrl } from '@/tests/support/cluster';

export interface TestDatabase {
  /** Address for whatever opens its own connections, as the role the instance works as. */
  url: string;
  /** Connections of the test itself. */
  pool: pg.Pool;
  /** Ends the pool and drops the database, whoever is still connected. */
  close(): Promise<void>;
}

/**
 * A fresh, migrated, empty database of its own: a copy of the template. Close it in `afterAll`.
 * Throws when the integration project's global set-up did not run.
 */
export async function openTestDatabase(): Promise<TestDatabase> {
  const adminUrl = process.env.ELLWAND_TEST_ADMIN_URL;
  const ownerUrl = process.env.ELLWAND_TEST_DATABASE_URL;
  if (!adminUrl || !ownerUrl)
    throw new Error('No test cluster: run this file in the integration or browser project');
  const name = `ellwand_test_${randomBytes(8).toString('hex')}`;
  await runAsAdmin(adminUrl, `create database ${name} template ${TEMPLATE} owner ellwand`);
  const url = databaseUrl(ownerUrl, name);
  const pool = new pg.Pool({ connectionString: url, max: 10 });
  // A test may cut connections on purpose; an idle one that dies is not an error of the test.
  pool.on('error', () => undefined);
  return {
    url,
    pool,
    close: async () => {
      await pool.end();
      await runAsAdmin(adminUrl, `drop database if exists ${name} with (force)`);
    },
  };
}

async function runAsAdmin(adminUrl: string, sql: string): Promise<void> {
  const admin = new pg.Client({ connectionString: adminUrl });
  await admin.connect();
  try {
    await admin.query(sql);
  } finally {
    await admin.end();
  }
}
