import { z } from 'zod';
import { databaseUrl, publicUrl } from '@/lib/env/parts';
import { lazyEnv } from '@/lib/env/read';

const schema = z
  .object({
    DATABASE_URL: databaseUrl,
    ELLWAND_SERVER_URL: publicUrl,
    ELLWAND_DATA_DIR: z.string().min(1),
    ELLWAND_REPO: z.string().min(1),
  })
  .transform((env) => ({
    databaseUrl: env.DATABASE_URL,
    serverUrl: env.ELLWAND_SERVER_URL,
    dataDir: env.ELLWAND_DATA_DIR,
    repo: env.ELLWAND_REPO,
  }));

/**
 * Settings of the seed: `{ databaseUrl, serverUrl, dataDir, repo }`. `dataDir` and `repo` are absolute paths; the
 * demo's files belong below `<dataDir>/demo`, `serverUrl` is what the demo's agents call.
 */
export const seedEnv = lazyEnv(schema);
