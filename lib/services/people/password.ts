import { hash, verify } from '@node-rs/argon2';

/** Argon2id, 19 MiB and two passes, the package's own defaults written out so that an update does not change them. */
const COST = { memoryCost: 19_456, timeCost: 2, parallelism: 1 };

/** The hash of a password, salt and cost included. */
export function hashPassword(password: string): Promise<string> {
  return hash(password, COST);
}

let nobodysHash: Promise<string> | undefined;

/**
 * Whether the password belongs to the hash. Without a hash (no such account) it spends the same time on a hash
 * that nothing matches, so that the time of the answer does not tell which accounts exist.
 */
export async function passwordMatches(stored: string | null, password: string): Promise<boolean> {
  nobodysHash ??= hashPassword('no account has this password');
  const matches = await verify(stored ?? (await nobodysHash), password);
  return stored !== null && matches;
}
