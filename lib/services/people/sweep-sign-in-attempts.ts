import { lt } from 'drizzle-orm';
import { signInAttempts } from '@/db/schema/people';
import { authoriseSystem } from '../authorise';
import type { ServiceContext } from '../context';
import { SIGN_IN_WINDOW_MS } from './sign-in-limits';

/** Forgets attempts that no limit counts any more. */
export async function sweepSignInAttempts({ ctx }: { ctx: ServiceContext }): Promise<void> {
  authoriseSystem(ctx);
  await ctx.db
    .delete(signInAttempts)
    .where(lt(signInAttempts.at, new Date(ctx.now.getTime() - SIGN_IN_WINDOW_MS)));
}
