import { spawn, type ChildProcess } from 'node:child_process';
import { EventEmitter, once } from 'node:events';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import type { Identity } from '@/scripts/house/process.mjs';
import { repo } from '@/scripts/house/repo.mjs';
import { type ownSettings } from '@/scripts/house/settings.mjs';

export interface StartCommand {
  url: string;
  process: ChildProcess;
  /** Everything it has printed so far. */
  printed(): string;
  /** Resolves when it has printed `text`; rejects when it ends first. */
  hasPrinted(text: string): Promise<void>;
  /** Resolves with its exit code, null after a signal. */
  ended: Promise<number | null>;
}

type Settings = Awaited<ReturnType<typeof ownSettings>>;

/** Runs `npm start` as a person would, on the ports of `settings` and with the build that tests share. */
export function npmStart(settings: Settings, args: string[] = []): StartCommand {
  const child = spawn('npm', ['start', '--', ...args], {
    cwd: repo,
    env: {
      ...process.env,
      PORT: String(settings.port),
      ELLWAND_DB_PORT: String(settings.dbPort),
      ELLWAND_REDIS_PORT: String(settings.redisPort),
      ELLWAND_MAIL_PORT: String(settings.mailPort),
      ELLWAND_DATA_DIR: settings.dataDir,
      ELLWAND_NEXT_DIST: settings.nextDist,
    },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  let text = '';
  const news = new EventEmitter();
  for (const stream of [child.stdout, child.stderr]) {
    stream.on('data', (chunk) => {
      text += String(chunk);
      news.emit('news');
    });
  }
  const ended = once(child, 'close').then(([code]) => (typeof code === 'number' ? code : null));
  void ended.then(() => news.emit('news'));
  return {
    url: settings.publicUrl,
    process: child,
    printed: () => text,
    hasPrinted: async (wanted) => {
      while (!text.includes(wanted)) {
        if (child.exitCode !== null) throw new Error(`It ended without "${wanted}":\n${text}`);
        await once(news, 'news');
      }
    },
    ended,
  };
}

/** The processes that a running start has noted in its data folder. */
export function runningIn(dataDir: string): { name: string; identity: Identity }[] {
  return JSON.parse(readFileSync(join(dataDir, 'running.json'), 'utf8')) as {
    name: string;
    identity: Identity;
  }[];
}

/** The start itself (not npm, which started it), as its lock names it. */
export function startProcess(dataDir: string): Identity {
  const lock = JSON.parse(readFileSync(join(dataDir, 'start.lock'), 'utf8')) as { identity: Identity };
  return lock.identity;
}
