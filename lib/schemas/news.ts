import { z } from 'zod';

/** The channel on which committed changes are told (`LISTEN`). */
export const NEWS_CHANNEL = 'ellwand_news';

/** What the database tells its listeners after a commit; ids only, the listener reads the rest. */
export const newsSchema = z.discriminatedUnion('news', [
  z.object({ news: z.literal('rig'), rigId: z.uuid() }),
  z.object({ news: z.literal('batch'), batchId: z.uuid() }),
  z.object({ news: z.literal('command'), agentId: z.uuid(), commandId: z.uuid() }),
  z.object({ news: z.literal('command-answered'), commandId: z.uuid() }),
  z.object({ news: z.literal('agent'), agentId: z.uuid() }),
  z.object({ news: z.literal('person'), personId: z.uuid() }),
  z.object({ news: z.literal('outbox') }),
]);

export type News = z.infer<typeof newsSchema>;
