import { chmodSync, mkdtempSync, readFileSync, readdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { readDemoAccounts } from '@/scripts/house/demo.mjs';
import { startHouse } from '@/scripts/house/house.mjs';
import { ownSettings } from '@/scripts/house/settings.mjs';

type House = Awaited<ReturnType<typeof startHouse>>;

export interface TestHouse {
  url: string;
  dataDir: string;
  /** Children by name ("web", "worker", "Redis", "PostgreSQL", "agent 1", …), to stop or crash them. */
  house: House;
  /** The demo's accounts and their password; undefined in an empty workshop. */
  accounts: ReturnType<typeof readDemoAccounts>;
  /** What the mail fake has stored, oldest first. */
  mails(): string[];
  /** The end of a child's log, by file name without ending ("web", "worker", "agent-1", "rigs"). */
  log(name: string): string;
  /** Stops everything and removes the folder. */
  stop(): Promise<void>;
}

const LOG_SHOWN = 4000;

interface HouseOptions {
  demo: boolean;
  /** How fast the demo's virtual rigs move, over a real one. */
  rigSpeed?: number;
}

/**
 * A whole Ellwand of its own, on free ports and in a folder that goes with it: PostgreSQL, Redis, mail fake, web, worker and,
 * with the demo, eight virtual rigs on two agents. Throws with the ends of its logs when it does not come up.
 */
export async function startTestHouse({ demo, rigSpeed }: HouseOptions): Promise<TestHouse> {
  const dataDir = mkdtempSync(join(tmpdir(), 'ellwand-house-'));
  chmodSync(dataDir, 0o711);
  const said: string[] = [];
  const log = (name: string) => readLog(dataDir, name);
  try {
    const settings = await ownSettings(dataDir, { demo, rigSpeed, durable: false });
    const house = await startHouse({ settings, say: (sentence) => said.push(sentence) });
    return {
      url: house.url,
      dataDir,
      house,
      log,
      accounts: readDemoAccounts(dataDir),
      mails: () => readMails(join(dataDir, 'mail')),
      stop: async () => {
        await house.stop();
        rmSync(dataDir, { recursive: true, force: true });
      },
    };
  } catch (error) {
    const logs = ['web', 'worker', 'database'].map((name) => `--- ${name}\n${log(name)}`);
    rmSync(dataDir, { recursive: true, force: true });
    throw new Error(`The house did not come up.\n${[...said, ...logs].join('\n')}`, { cause: error });
  }
}

function readLog(dataDir: string, name: string): string {
  try {
    return readFileSync(join(dataDir, 'log', `${name}.log`), 'utf8').slice(-LOG_SHOWN);
  } catch {
    return '(nothing)';
  }
}

function readMails(folder: string): string[] {
  return readdirSync(folder)
    .filter((name) => name.endsWith('.eml') && !name.startsWith('.'))
    .sort()
    .map((name) => readFileSync(join(folder, name), 'utf8'));
}
