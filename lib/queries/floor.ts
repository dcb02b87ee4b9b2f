import { queryOptions } from '@tanstack/react-query';
import { floorDtoSchema, rigPageDtoSchema } from '@/lib/schemas/floor';
import { fetchJson } from './fetch-json';

/** The floor: all rigs and what waits. Kept fresh by the event stream; asked anew every 30 s all the same. */
export const floorQuery = () =>
  queryOptions({
    queryKey: ['floor'],
    queryFn: ({ signal }) => fetchJson('/api/floor', floorDtoSchema, signal),
    refetchInterval: 30_000,
  });

/** One rig's page for the signed-in person. */
export const rigPageQuery = (rigId: string) =>
  queryOptions({
    queryKey: ['rig', rigId],
    queryFn: ({ signal }) => fetchJson(`/api/rigs/${rigId}`, rigPageDtoSchema, signal),
    refetchInterval: 30_000,
  });
