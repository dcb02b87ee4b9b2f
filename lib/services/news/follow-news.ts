import { setTimeout as wait } from 'node:timers/promises';
import { Client } from 'pg';
import { NEWS_CHANNEL, newsSchema, type News } from '@/lib/schemas/news';
import { authoriseSystem } from '../authorise';
import type { ServiceContext } from '../context';

const CONNECT_TIMEOUT_MS = 1_500;
const RETRY_FIRST_MS = 100;
const RETRY_MOST_MS = 2_000;
/** A connection whose other end died silently is found out within this and the query's time limit. */
const LOOK_EVERY_MS = 5_000;
const LOOK_TIMEOUT_MS = 2_000;

export interface NewsFollower {
  onNews: (news: News) => void;
  /** The line stands, the first time or again: what was told before now was missed. */
  onConnected: () => void;
  onLost: (cause: unknown) => void;
}

function parsed(payload: string | undefined): News | null {
  try {
    const news = newsSchema.safeParse(JSON.parse(payload ?? ''));
    return news.success ? news.data : null;
  } catch {
    return null;
  }
}

/** Listens on one connection until it ends; resolves with why. */
async function listenOnce(
  databaseUrl: string,
  follower: NewsFollower,
  closing: AbortSignal,
): Promise<unknown> {
  const client = new Client({
    connectionString: databaseUrl,
    connectionTimeoutMillis: CONNECT_TIMEOUT_MS,
    query_timeout: LOOK_TIMEOUT_MS,
    keepAlive: true,
  });
  const ended = new Promise<unknown>((resolve) => {
    client.once('error', resolve);
    client.once('end', () => resolve(null));
    closing.addEventListener('abort', () => resolve(null), { once: true });
  });
  client.on('notification', ({ payload }) => {
    const news = parsed(payload);
    if (news) follower.onNews(news);
  });
  const look = setInterval(() => {
    client.query('select 1').catch((cause: unknown) => client.emit('error', cause));
  }, LOOK_EVERY_MS);
  try {
    await client.connect();
    await client.query(`listen ${NEWS_CHANNEL}`);
    follower.onConnected();
    return await ended;
  } catch (cause) {
    return cause;
  } finally {
    clearInterval(look);
    // Whatever ending it answers: the connection is given up.
    client.on('error', follower.onLost);
    client.end().catch(follower.onLost);
  }
}

/**
 * Follows what the database tells after each commit, on one connection that is opened again whenever it is lost, until
 * `closing` is aborted; resolves then. News told while it was lost are gone: `onConnected` reads anew.
 */
export async function followNews({
  ctx,
  databaseUrl,
  follower,
  closing,
}: {
  ctx: Pick<ServiceContext, 'actor'>;
  databaseUrl: string;
  follower: NewsFollower;
  closing: AbortSignal;
}): Promise<void> {
  authoriseSystem(ctx);
  let retryMs = RETRY_FIRST_MS;
  const told: NewsFollower = {
    ...follower,
    onConnected: () => {
      retryMs = RETRY_FIRST_MS;
      follower.onConnected();
    },
  };
  while (!closing.aborted) {
    const cause = await listenOnce(databaseUrl, told, closing);
    if (closing.aborted) return;
    follower.onLost(cause);
    await wait(retryMs, undefined, { signal: closing }).catch(() => undefined);
    retryMs = Math.min(retryMs * 2, RETRY_MOST_MS);
  }
}
