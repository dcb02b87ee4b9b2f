import { type ChildProcess, spawn } from 'node:child_process';
import { repo } from '@/scripts/house/repo.mjs';

/** The worker as a process of its own, as the house starts it; nobody takes its mail. */
export function startWorkerProcess(settings: { databaseUrl: string; redisUrl: string }): ChildProcess {
  return spawn(process.execPath, ['scripts/run.mjs', 'lib/jobs/worker.ts'], {
    cwd: repo,
    env: {
      ...process.env,
      DATABASE_URL: settings.databaseUrl,
      REDIS_URL: settings.redisUrl,
      SMTP_URL: 'smtp://127.0.0.1:9',
      NEXTAUTH_URL: 'http://127.0.0.1:1',
    },
    stdio: ['ignore', 'ignore', 'inherit'],
  });
}
