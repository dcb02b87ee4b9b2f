import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { migrateDatabase, migrationsFolderOf } from '@/db/migrate';
import pg from 'pg';
import { startCluster } from '@/scripts/house/cluster.mjs';
import { freePorts } from '@/scripts/house/ports.mjs';
import { repo } from '@/scripts/house/repo.mjs';
import { readOrMakeSecrets } from '@/scripts/house/secrets.mjs';

export const TEMPLATE = 'ellwand_template';

/**
 * Vitest's global set-up of the integration tests: one PostgreSQL cluster for all test files, on a free port and in a
 * folder that goes with it, holding a migrated template that each file copies. Returns the tear-down.
 */
export default async function setUp(): Promise<() => Promise<void>> {
  const dataDir = mkdtempSync(join(tmpdir(), 'ellwand-tests-'));
  const secrets = readOrMakeSecrets(dataDir);
  const [port] = await freePorts(1);
  if (port === undefined) throw new Error('No port was given');
  const cluster = await startCluster({ dataDir, port, durable: false, secrets, say: console.error });
  const tearDown = async () => {
    await cluster.stop();
    rmSync(dataDir, { recursive: true, force: true });
  };
  try {
    const base = `127.0.0.1:${port}/postgres`;
    const adminUrl = `postgresql://postgres:${secrets.databaseAdmin}@${base}`;
    const ownerUrl = `postgresql://ellwand:${secrets.database}@${base}`;
    await makeTemplate(adminUrl, ownerUrl);
    // Vitest hands its environment on to the processes that run the test files.
    process.env.ELLWAND_TEST_ADMIN_URL = adminUrl;
    process.env.ELLWAND_TEST_DATABASE_URL = ownerUrl;
  } catch (error) {
    await tearDown();
    throw error;
  }
  return tearDown;
}

async function makeTemplate(adminUrl: string, ownerUrl: string): Promise<void> {
  const admin = new pg.Client({ connectionString: adminUrl });
  await admin.connect();
  try {
    await admin.query(`create database ${TEMPLATE} owner ellwand`);
  } finally {
    await admin.end();
  }
  await migrateDatabase(databaseUrl(ownerUrl, TEMPLATE), migrationsFolderOf(repo));
}

/** The address of the database `name` where `baseUrl` is. */
export function databaseUrl(baseUrl: string, name: string): string {
  const url = new URL(baseUrl);
  url.pathname = `/${name}`;
  return url.href;
}
