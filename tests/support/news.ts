import pg from 'pg';
import { NEWS_CHANNEL, newsSchema, type News } from '@/lib/schemas/news';

export interface Listener {
  /** All news of a kind heard since the listener was opened, once everything committed before is in. */
  heard: <Kind extends News['news']>(kind: Kind) => Promise<Extract<News, { news: Kind }>[]>;
  close: () => Promise<void>;
}

/** Listens to what the database tells after commits. */
export async function listenForNews(url: string): Promise<Listener> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  const news: News[] = [];
  let onMark: ((mark: string) => void) | undefined;
  client.on('notification', ({ channel, payload }) => {
    if (channel === 'mark') onMark?.(payload ?? '');
    else news.push(newsSchema.parse(JSON.parse(payload ?? '')));
  });
  await client.query(`listen ${NEWS_CHANNEL}`);
  await client.query('listen mark');
  let marks = 0;
  return {
    heard: async (kind) => {
      marks += 1;
      const wanted = String(marks);
      const marked = new Promise<void>((resolve) => {
        onMark = (mark) => mark === wanted && resolve();
      });
      // Notifications come in the order of commits, so whatever was told before is here once the mark is.
      await client.query('select pg_notify($1, $2)', ['mark', wanted]);
      await marked;
      return news.filter((one): one is Extract<News, { news: typeof kind }> => one.news === kind);
    },
    close: () => client.end(),
  };
}
