import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';

/**
 * The demo's accounts as the seed left them for the person at the keyboard, undefined in a workshop without demo.
 * @param {string} dataDir
 * @returns {{password: string, accounts: {email: string, roles: string[]}[]} | undefined}
 */
export function readDemoAccounts(dataDir) {
  const file = join(dataDir, 'demo', 'accounts.json');
  return existsSync(file) ? JSON.parse(readFileSync(file, 'utf8')) : undefined;
}
