import { DatabaseError } from 'pg';
import type { Db } from '@/db/client';
import { EllwandError } from '@/lib/errors';
import type { Actor, ServiceContext } from './context';

/** The database's own refusals, told as codes: our rules (EW…) and unique keys. */
function translate(error: unknown): unknown {
  const cause = error instanceof Error && error.cause instanceof DatabaseError ? error.cause : error;
  if (!(cause instanceof DatabaseError)) return error;
  if (cause.code === 'EW001') return new EllwandError('illegal-step', { cause: error });
  if (cause.code === '23505') return new EllwandError('already-exists', { cause: error });
  return error;
}

/** Runs `work` in one transaction; a savepoint when `ctx.db` is a transaction already. */
export async function inTransaction<A extends Actor, Result>(
  ctx: ServiceContext<A>,
  work: (inner: ServiceContext<A>) => Promise<Result>,
): Promise<Result> {
  try {
    return await ctx.db.transaction((db: Db) => work({ ...ctx, db }));
  } catch (error) {
    throw translate(error);
  }
}
