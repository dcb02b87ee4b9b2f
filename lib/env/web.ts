import { z } from 'zod';
import { databaseUrl, instance, publicUrl, secret } from '@/lib/env/parts';
import { lazyEnv } from '@/lib/env/read';

export const webSchema = z
  .object({
    DATABASE_URL: databaseUrl,
    NEXTAUTH_SECRET: secret,
    NEXTAUTH_URL: publicUrl,
    ELLWAND_INSTANCE: instance,
    ELLWAND_TRUST_PROXY: z.enum(['0', '1']).default('0'),
  })
  .transform((env) => ({
    databaseUrl: env.DATABASE_URL,
    authSecret: env.NEXTAUTH_SECRET,
    publicUrl: env.NEXTAUTH_URL,
    instance: env.ELLWAND_INSTANCE,
    trustProxy: env.ELLWAND_TRUST_PROXY === '1',
  }));

/**
 * Settings of the web process: `{ databaseUrl, authSecret, publicUrl, instance, trustProxy }`. `instance` goes into the
 * names of cookies; `trustProxy` says that a proxy of ours writes the last entry of `X-Forwarded-For`.
 * There is no Redis here: the web writes the outbox and the worker relays it.
 */
export const webEnv = lazyEnv(webSchema);
