import { keepPreviousData, queryOptions } from '@tanstack/react-query';
import { type BatchList, batchListParams, batchPageSchema } from '@/lib/schemas/batch-list';
import { batchDtoSchema } from '@/lib/schemas/batches';
import { fetchJson } from './fetch-json';

/** Batches as searched, filtered and sorted; the event stream says when one changed. */
export const batchesQuery = (list: BatchList) =>
  queryOptions({
    queryKey: ['batches', list],
    queryFn: ({ signal }) => fetchJson(`/api/batches?${batchListParams(list)}`, batchPageSchema, signal),
    refetchInterval: 30_000,
    placeholderData: keepPreviousData,
  });

/** One batch with its lines and lots. */
export const batchQuery = (batchId: string) =>
  queryOptions({
    queryKey: ['batch', batchId],
    queryFn: ({ signal }) => fetchJson(`/api/batches/${batchId}`, batchDtoSchema, signal),
    refetchInterval: 30_000,
  });
