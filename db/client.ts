import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres';
import { Pool } from 'pg';

export type Database = NodePgDatabase;
/** A database or an open transaction: services take either. */
export type Db = NodePgDatabase | Parameters<Parameters<NodePgDatabase['transaction']>[0]>[0];

/** Opens a pool. Every wait is bounded, so that a dead database is an error and not a hanging page. */
export function openDatabase(
  url: string,
  options: { connectionsMax?: number; connectTimeoutMs?: number } = {},
): { db: Database; pool: Pool } {
  const pool = new Pool({
    connectionString: url,
    max: options.connectionsMax ?? 10,
    connectionTimeoutMillis: options.connectTimeoutMs ?? 1_500,
    statement_timeout: 15_000,
    idle_in_transaction_session_timeout: 20_000,
  });
  return { db: drizzle(pool, { casing: 'snake_case' }), pool };
}
