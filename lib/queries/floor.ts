import { queryOptions } from '@tanstack/react-query';
import { type FloorDto, floorDtoSchema, type RigPageDto, rigPageDtoSchema } from '@/lib/schemas/floor';
import { fetchJson } from './fetch-json';
import { later } from './later';

/** The floor: all rigs and what waits. Kept fresh by the event stream; asked anew every 30 s all the same. */
export const floorQuery = () =>
  queryOptions({
    queryKey: ['floor'],
    queryFn: async ({ signal, client, queryKey }): Promise<FloorDto> => {
      const told = await fetchJson('/api/floor', floorDtoSchema, signal);
      const known = client.getQueryData<FloorDto>(queryKey)?.rigs;
      const knownOf = (rigId: string) => known?.find(({ id }) => id === rigId);
      return { ...told, rigs: told.rigs.map((rig) => later(knownOf(rig.id), rig)) };
    },
    refetchInterval: 30_000,
  });

/** One rig's page for the signed-in person. */
export const rigPageQuery = (rigId: string) =>
  queryOptions({
    queryKey: ['rig', rigId],
    queryFn: async ({ signal, client, queryKey }): Promise<RigPageDto> => {
      const told = await fetchJson(`/api/rigs/${rigId}`, rigPageDtoSchema, signal);
      return { ...told, rig: later(client.getQueryData<RigPageDto>(queryKey)?.rig, told.rig) };
    },
    refetchInterval: 30_000,
  });
