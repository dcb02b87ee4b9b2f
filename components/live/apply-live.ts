import type { QueryClient } from '@tanstack/react-query';
import { floorQuery, rigPageQuery } from '@/lib/queries/floor';
import type { LiveMessage, RigDto } from '@/lib/schemas/floor';

function putRig(client: QueryClient, rig: RigDto): void {
  client.setQueryData(floorQuery().queryKey, (floor) =>
    floor
      ? {
          ...floor,
          at: rig.at,
          rigs: floor.rigs.map((old) => (old.id === rig.id && old.at <= rig.at ? rig : old)),
        }
      : floor,
  );
  const page = client.getQueryData(rigPageQuery(rig.id).queryKey);
  if (!page || page.rig.at > rig.at) return;
  client.setQueryData(rigPageQuery(rig.id).queryKey, { ...page, rig });
  // A new run, hold or version changes what the person must read: ask the server, which knows who asks.
  const before = page.rig;
  if (
    before.run?.id !== rig.run?.id ||
    before.run?.state !== rig.run?.state ||
    before.notesVersion !== rig.notesVersion
  ) {
    void client.invalidateQueries({ queryKey: rigPageQuery(rig.id).queryKey });
  }
}

/** Puts one message of the event stream into the query cache. */
export function applyLive(client: QueryClient, message: LiveMessage): void {
  switch (message.kind) {
    case 'rig':
      putRig(client, message.rig);
      return;
    case 'waiting':
      client.setQueryData(floorQuery().queryKey, (floor) =>
        floor ? { ...floor, waiting: message.waiting } : floor,
      );
      return;
    case 'batch':
      void client.invalidateQueries({ queryKey: ['batches'] });
      void client.invalidateQueries({ queryKey: ['batch', message.batchId] });
      return;
    case 'hello':
      void client.invalidateQueries();
      return;
    default:
      return;
  }
}
