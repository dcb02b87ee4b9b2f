import { eq } from 'drizzle-orm';
import { outbox } from '@/db/schema/traffic';
import type { ServiceContext } from '../context';
import { claim, type Work } from './claim';

interface Claim<Result> {
  ctx: ServiceContext;
  id: number;
  work: Work<Result>;
}

/**
 * Claims one row and does its work in the same transaction: `null` and no work when it was done before. A failure
 * leaves the row open for the next try.
 */
export function withClaim<Result>({ ctx, id, work }: Claim<Result>): Promise<Result | null> {
  return claim(ctx, eq(outbox.id, id), work);
}
