import { workerEnv } from '@/lib/env/worker';
import { runWorker } from './run-worker';

const closing = new AbortController();
for (const signal of ['SIGINT', 'SIGTERM'] as const) process.once(signal, () => closing.abort());

const SAME_AGAIN_MS = 10_000;
const saidAtMs = new Map<string, number>();

/** Writes a failure to the log, the same one at most once in ten seconds. */
function log(what: string, cause: unknown): void {
  const line = `${what}: ${cause instanceof Error ? (cause.stack ?? cause.message) : String(cause)}`;
  const nowMs = Date.now();
  const last = saidAtMs.get(what);
  if (last !== undefined && nowMs - last < SAME_AGAIN_MS) return;
  saidAtMs.set(what, nowMs);
  console.error(`${new Date(nowMs).toISOString()} ${line}`);
}

const { databaseUrl, redisUrl, smtpUrl, publicUrl } = workerEnv();
const mailFrom = `Ellwand <ellwand@${new URL(publicUrl).hostname}>`;

await runWorker({ databaseUrl, redisUrl, smtpUrl, mailFrom }, closing.signal, log);
process.exit(0);
