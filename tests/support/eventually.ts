import pg from 'pg';
import { NEWS_CHANNEL } from '@/lib/schemas/news';

/** Rows can change without news; then this is how soon it is looked again. */
const LOOK_EVERY_MS = 250;

/**
 * Resolves with what `look` finds, looking whenever the database tells of a commit and every quarter second. Rejects
 * with `what` when it found nothing (null, undefined or false) within `timeoutMs`.
 */
export async function eventually<Found>(
  url: string,
  what: string,
  look: () => Promise<Found | null | undefined | false>,
  timeoutMs = 20_000,
): Promise<Found> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  let wake = () => {};
  client.on('notification', () => wake());
  await client.query(`listen ${NEWS_CHANNEL}`);
  const untilMs = Date.now() + timeoutMs;
  try {
    for (;;) {
      const told = new Promise<void>((resolve) => {
        wake = resolve;
        setTimeout(resolve, LOOK_EVERY_MS);
      });
      const found = await look();
      if (found !== null && found !== undefined && found !== false) return found;
      if (Date.now() > untilMs) throw new Error(`Not within ${timeoutMs} ms: ${what}`);
      await told;
    }
  } finally {
    await client.end();
  }
}
