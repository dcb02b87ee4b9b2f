import { randomInt } from 'node:crypto';
import { hashSecret, plainCode } from '../traffic/secrets';

/** No letter that is taken for a digit or for another letter when it is read out. */
const ALPHABET = '23456789ABCDEFGHJKMNPQRSTUVWXYZ';
const GROUPS = 4;
const GROUP_LENGTH = 4;

/** How long an owner has to carry a code to the rig's computer. */
export const PAIRING_VALID_MS = 30 * 60_000;

/** A new one-time code, `K7WQ-…` in four groups of four: about 79 bits, so a plain digest of it may be stored. */
export function makePairingCode(): { code: string; hash: string } {
  const group = () =>
    Array.from({ length: GROUP_LENGTH }, () => ALPHABET[randomInt(ALPHABET.length)]).join('');
  const code = Array.from({ length: GROUPS }, group).join('-');
  return { code, hash: hashSecret(plainCode(code)) };
}
