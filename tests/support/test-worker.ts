import { runWorker } from '@/lib/jobs/run-worker';

export interface TestWorker {
  /** What it logged, newest last. */
  said: string[];
  stop: () => Promise<void>;
}

/** The worker in this process, on a test's own database, Redis and mail server. */
export function startTestWorker(settings: {
  databaseUrl: string;
  redisUrl: string;
  smtpUrl?: string;
}): TestWorker {
  const closing = new AbortController();
  const said: string[] = [];
  const { databaseUrl, redisUrl, smtpUrl = 'smtp://127.0.0.1:9' } = settings;
  const ended = runWorker(
    { databaseUrl, redisUrl, smtpUrl, mailFrom: 'Ellwand <ellwand@test.example>' },
    closing.signal,
    (what, cause) => said.push(`${what}: ${String(cause)}`),
  );
  return {
    said,
    stop: async () => {
      closing.abort();
      await ended;
    },
  };
}
