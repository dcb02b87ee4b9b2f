import { z } from 'zod';
import { openDatabase } from '@/db/client';
import { seedEnv } from '@/lib/env/seed';
import type { LiveMessage, RigDto } from '@/lib/schemas/floor';
import { readFloor } from '@/lib/services/floor/read-floor';
import { readDemoAccounts } from '@/scripts/house/demo.mjs';
import { actAs } from '@/scripts/hands/actors';
import { followLive } from './live-client';
import { Operator } from './operator';
import { queueWork } from './queue-work';
import { cookieHeader, signIn, type Cookie } from './sign-in';

const ALL_CUTTING_TIMEOUT_MS = 180_000;

const accountsSchema = z.object({
  password: z.string(),
  accounts: z.array(z.object({ email: z.string(), roles: z.array(z.string()) })),
});

/** The house's floor with all rigs at work and an operator who keeps them so. */
export interface BusyFloor {
  url: string;
  dataDir: string;
  rigs: readonly RigDto[];
  /** Of the operator's session. */
  cookies: readonly Cookie[];
  /** Rejects once something goes wrong that makes the measurement void; never resolves. */
  failed: Promise<never>;
  close(): Promise<void>;
}

function accountOf(dataDir: string, role: string): { email: string; password: string } {
  const { password, accounts } = accountsSchema.parse(readDemoAccounts(dataDir));
  const account = accounts.find(({ roles }) => roles.includes(role));
  if (!account) throw new Error(`The demo has no ${role}`);
  return { email: account.email, password };
}

/** Resolves once every rig has shown more pieces than those that somebody measures first. */
function allCutting(rigIds: readonly string[]) {
  const waited = new Set(rigIds);
  let done: () => void = () => undefined;
  const all = new Promise<void>((resolve) => {
    done = resolve;
  });
  const see = ({ id, run }: RigDto) => {
    if (run?.state === 'cutting' && run.cut > run.firstPieces) waited.delete(id);
    if (waited.size === 0) done();
  };
  return { all, see, waited };
}

/**
 * Queues work for `minutes`, starts every rig of the house as its operator, and waits until all are cutting.
 * `onMessage` is told every live message as a client without a browser gets it, from the start on.
 */
export async function openBusyFloor(
  minutes: number,
  onMessage: (message: LiveMessage, atMs: number) => void,
): Promise<BusyFloor> {
  const { databaseUrl, serverUrl: url, dataDir } = seedEnv();
  const { db, pool } = openDatabase(databaseUrl);
  const closing = new AbortController();
  let fail: (error: unknown) => void = () => undefined;
  const failed = new Promise<never>((_resolve, reject) => {
    fail = reject;
  });
  // Whoever waits for it hears of it; nobody may be waiting yet.
  failed.catch(() => undefined);
  const close = async () => {
    closing.abort();
    await pool.end();
  };
  try {
    const operatorAccount = accountOf(dataDir, 'operator');
    const cookies = await signIn(url, operatorAccount);
    const operator = await actAs(db, operatorAccount);
    const scheduler = await actAs(db, accountOf(dataDir, 'scheduler'));
    const hand = new Operator(operator, fail);
    const { rigs } = await readFloor({ ctx: operator() });
    const cutting = allCutting(rigs.map(({ id }) => id));
    const listen = (message: LiveMessage, atMs: number) => {
      onMessage(message, atMs);
      if (message.kind !== 'rig') return;
      cutting.see(message.rig);
      hand.see(message.rig);
    };
    followLive(url, cookieHeader(cookies), listen, closing.signal).catch(fail);
    await queueWork(scheduler, rigs, minutes);
    await Promise.race([cutting.all, failed, giveUp(cutting.waited, rigs)]);
    return { url, dataDir, rigs, cookies, failed, close };
  } catch (error) {
    await close();
    throw error;
  }
}

async function giveUp(waited: ReadonlySet<string>, rigs: readonly RigDto[]): Promise<never> {
  await new Promise((resolve) => setTimeout(resolve, ALL_CUTTING_TIMEOUT_MS).unref());
  const names = rigs.filter(({ id }) => waited.has(id)).map(({ name }) => name);
  throw new Error(`Not cutting after ${ALL_CUTTING_TIMEOUT_MS / 1000} s: ${names.join(', ')}`);
}
