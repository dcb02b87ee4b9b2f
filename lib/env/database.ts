import { z } from 'zod';
import { databaseUrl } from '@/lib/env/parts';
import { lazyEnv } from '@/lib/env/read';

const schema = z
  .object({ DATABASE_URL: databaseUrl })
  .transform((env) => ({ databaseUrl: env.DATABASE_URL }));

/** Where the database is: `{ databaseUrl }`. Throws when DATABASE_URL is missing. */
export const databaseEnv = lazyEnv(schema);
