import { z } from 'zod';
import { BATCH_STATES } from '@/lib/fleet/batch-state';
import { LOT_STATES } from '@/lib/fleet/lot';
import { batchSummaryDtoSchema, lotDtoSchema } from './batches';

export const BATCH_SORTS = ['due', 'priority', 'number', 'name'] as const;
export const BATCH_DUES = ['overdue', 'day', 'week', 'none'] as const;
export const BATCHES_A_PAGE = 50;

/**
 * What the list of batches is asked for, as it stands in the URL. Parts that are missing or malformed fall back to
 * their default, so that an old link still opens.
 */
export const batchListSchema = z.object({
  search: z.string().trim().max(80).catch(''),
  state: z.enum(['open', 'all', ...BATCH_STATES]).catch('open'),
  wire: z.uuid().nullable().catch(null),
  due: z.enum(['any', ...BATCH_DUES]).catch('any'),
  sort: z.enum(BATCH_SORTS).catch('due'),
  descending: z.stringbool().or(z.boolean()).catch(false),
  page: z.coerce.number().int().min(1).max(10_000).catch(1),
});

export const batchPageSchema = z.object({
  batches: z.array(batchSummaryDtoSchema),
  total: z.number().int(),
  page: z.number().int(),
  pages: z.number().int(),
});

export const lotListSchema = z.object({
  state: z.enum(LOT_STATES).nullable().catch(null),
  batchId: z.uuid().nullable().catch(null),
  page: z.coerce.number().int().min(1).max(10_000).catch(1),
});

export const lotPageSchema = z.object({
  lots: z.array(lotDtoSchema),
  total: z.number().int(),
  page: z.number().int(),
  pages: z.number().int(),
});

export type BatchList = z.infer<typeof batchListSchema>;
export type BatchPage = z.infer<typeof batchPageSchema>;
export type LotPage = z.infer<typeof lotPageSchema>;

/** The list's query as it belongs into a URL; what is default is left out. */
export function batchListParams(list: BatchList): URLSearchParams {
  const standard = batchListSchema.parse({});
  const params = new URLSearchParams();
  for (const [name, value] of Object.entries(list)) {
    const usual = standard[name as keyof BatchList];
    if (value !== null && value !== usual) params.set(name, String(value));
  }
  return params;
}
