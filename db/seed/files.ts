import { existsSync, mkdirSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { z } from 'zod';
import { benchFile } from './bench-file';
import { DEMO_AGENTS, DEMO_RIGS } from './demo/rigs';

/** Where the demo's files belong: only their owner may read them, they hold a password and pairing codes. */
export interface DemoPlace {
  /** Absolute path of the instance's data folder. */
  dataDir: string;
  /** What the demo's agents call. */
  serverUrl: string;
  /** How fast the virtual rigs move, over a real one. */
  rigSpeed: number;
}

const agentFileSchema = z.looseObject({ pairingCode: z.string() });

function folderOf({ dataDir }: DemoPlace): string {
  return join(dataDir, 'demo');
}

function agentFile(place: DemoPlace, index: number): string {
  return join(folderOf(place), `agent-${index + 1}.json`);
}

function write(path: string, content: object): void {
  writeFileSync(`${path}.draft`, `${JSON.stringify(content, null, 2)}\n`, { mode: 0o600 });
  renameSync(`${path}.draft`, path);
}

/** The configuration of the demo's agent number `index`, from 0. */
function agentConfig(place: DemoPlace, index: number, pairingCode: string): object {
  const rigs = DEMO_AGENTS[index]?.rigs ?? [];
  return {
    server: place.serverUrl,
    dataDir: join(folderOf(place), `agent-${index + 1}`),
    pairingCode,
    rigs: rigs.map((rig) => ({ rig, port: join(folderOf(place), 'tty', rig) })),
  };
}

/** Makes the demo's folder anew; tokens and tallies of an instance that is gone go with it. */
export function writeDemoFiles(
  place: DemoPlace,
  accounts: { password: string; accounts: { name: string; email: string; roles: string[] }[] },
  pairingCodes: readonly string[],
): void {
  rmSync(folderOf(place), { recursive: true, force: true });
  mkdirSync(folderOf(place), { recursive: true, mode: 0o700 });
  write(join(folderOf(place), 'accounts.json'), accounts);
  write(join(folderOf(place), 'rigs.json'), benchFile(folderOf(place), place.rigSpeed, DEMO_RIGS));
  pairingCodes.forEach((code, index) => write(agentFile(place, index), agentConfig(place, index, code)));
}

/** Brings addresses and paths up to date where a demo is: the instance may have another port or folder than last time. */
export function refreshDemoFiles(place: DemoPlace): void {
  DEMO_AGENTS.forEach((_agent, index) => {
    const path = agentFile(place, index);
    if (!existsSync(path)) return;
    const { pairingCode } = agentFileSchema.parse(JSON.parse(readFileSync(path, 'utf8')));
    write(path, agentConfig(place, index, pairingCode));
  });
  const rigs = join(folderOf(place), 'rigs.json');
  if (existsSync(rigs)) write(rigs, benchFile(folderOf(place), place.rigSpeed, DEMO_RIGS));
}
