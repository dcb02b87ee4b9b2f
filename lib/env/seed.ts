import { z } from 'zod';
import { databaseUrl, publicUrl } from '@/lib/env/parts';
import { lazyEnv } from '@/lib/env/read';

const schema = z
  .object({
    DATABASE_URL: databaseUrl,
    ELLWAND_SERVER_URL: publicUrl,
    ELLWAND_DATA_DIR: z.string().min(1),
    ELLWAND_REPO: z.string().min(1),
    ELLWAND_RIG_SPEED: z.coerce.number('a number from 0.1 to 50').min(0.1).max(50).default(2),
  })
  .transform((env) => ({
    databaseUrl: env.DATABASE_URL,
    serverUrl: env.ELLWAND_SERVER_URL,
    dataDir: env.ELLWAND_DATA_DIR,
    repo: env.ELLWAND_REPO,
    rigSpeed: env.ELLWAND_RIG_SPEED,
  }));

/**
 * Settings of the seed: `{ databaseUrl, serverUrl, dataDir, repo, rigSpeed }`. `dataDir` and `repo` are absolute paths;
 * the demo's files belong below `<dataDir>/demo`, `serverUrl` is what the demo's agents call. `rigSpeed` is the virtual
 * rigs' motion over a real one's: at 2 a lot of some hundred pieces ends while somebody learns.
 */
export const seedEnv = lazyEnv(schema);
