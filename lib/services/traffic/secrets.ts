import { createHash, randomBytes, timingSafeEqual } from 'node:crypto';

/** SHA-256 of a secret as 64 hex digits: what is stored of pairing codes and tokens. */
export function hashSecret(secret: string): string {
  return createHash('sha256').update(secret, 'utf8').digest('hex');
}

/** A new token: 32 random bytes, which need no slow hash. */
export function newToken(): string {
  return randomBytes(32).toString('base64url');
}

/** A pairing code as typed, without the blanks, hyphens and small letters that people add. */
export function plainCode(typed: string): string {
  return typed.toUpperCase().replaceAll(/[^0-9A-Z]/g, '');
}

/** Compares two hashes in the same time wherever they differ. */
export function hashesMatch(one: string, other: string): boolean {
  const [left, right] = [Buffer.from(one, 'hex'), Buffer.from(other, 'hex')];
  return left.length === right.length && timingSafeEqual(left, right);
}
