import { z } from 'zod';
import { databaseUrl, publicUrl, redisUrl, smtpUrl } from '@/lib/env/parts';
import { lazyEnv } from '@/lib/env/read';

const schema = z
  .object({
    DATABASE_URL: databaseUrl,
    REDIS_URL: redisUrl,
    SMTP_URL: smtpUrl,
    NEXTAUTH_URL: publicUrl,
  })
  .transform((env) => ({
    databaseUrl: env.DATABASE_URL,
    redisUrl: env.REDIS_URL,
    smtpUrl: env.SMTP_URL,
    publicUrl: env.NEXTAUTH_URL,
  }));

/** Settings of the worker: `{ databaseUrl, redisUrl, smtpUrl, publicUrl }`. */
export const workerEnv = lazyEnv(schema);
