import { z } from 'zod';
import { databaseUrl, instance, publicUrl, secret } from '@/lib/env/parts';
import { lazyEnv } from '@/lib/env/read';

export const webSchema = z
  .object({
    DATABASE_URL: databaseUrl,
    NEXTAUTH_SECRET: secret,
    NEXTAUTH_URL: publicUrl,
    ELLWAND_INSTANCE: instance,
  })
  .transform((env) => ({
    databaseUrl: env.DATABASE_URL,
    authSecret: env.NEXTAUTH_SECRET,
    publicUrl: env.NEXTAUTH_URL,
    instance: env.ELLWAND_INSTANCE,
  }));

/**
 * Settings of the web process: `{ databaseUrl, authSecret, publicUrl, instance }`. `instance` goes into the names of
 * cookies. There is no Redis here: the web writes the outbox and the worker relays it.
 */
export const webEnv = lazyEnv(webSchema);
