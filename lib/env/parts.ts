import { z } from 'zod';

/** Settings that more than one process reads, each written once. */
export const databaseUrl = z.string().regex(/^postgres(ql)?:\/\//, 'a postgresql:// address');
export const redisUrl = z.string().regex(/^rediss?:\/\//, 'a redis:// address');
export const smtpUrl = z.string().regex(/^smtps?:\/\//, 'an smtp:// address');
export const publicUrl = z.url();
export const secret = z.string().min(32);

/** Tells instances on one computer apart (cookies ignore ports): letters, digits and hyphens. */
export const instance = z.string().regex(/^[a-z0-9-]{1,40}$/, 'letters, digits and hyphens');
