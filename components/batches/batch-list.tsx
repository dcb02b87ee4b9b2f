'use client';

import { useQuery } from '@tanstack/react-query';
import Link from 'next/link';
import { useSearchParams } from 'next/navigation';
import { useRights } from '@/components/shell/rights';
import { LinkButton } from '@/components/ui/button';
import { PageHead } from '@/components/ui/page-head';
import { batchesQuery } from '@/lib/queries/batches';
import { routes } from '@/lib/routes';
import { type BatchList, batchListParams, batchListSchema, type BatchPage } from '@/lib/schemas/batch-list';
import type { WireDto } from '@/lib/schemas/stock';
import { BatchFilters } from './batch-filters';
import { BatchRow } from './batch-row';
import { counted } from './words';

function hrefOf(list: BatchList): string {
  const params = batchListParams(list).toString();
  return params ? `${routes.batches()}?${params}` : routes.batches();
}

function isNarrowed(list: BatchList): boolean {
  const usual = batchListSchema.parse({});
  return (['search', 'state', 'wire', 'due'] as const).some((name) => list[name] !== usual[name]);
}

function Nothing({ list }: { list: BatchList }) {
  const may = useRights();
  return (
    <div className="page py-10">
      {isNarrowed(list) ? (
        <p>
          No batch is like that.{' '}
          <Link href={routes.batches()} className="underline">
            Show all open ones
          </Link>
        </p>
      ) : (
        <p>
          No batch is open.{' '}
          {may('batches.write') ? 'Make one by hand, or upload a cut list.' : 'A scheduler can make one.'}
        </p>
      )}
    </div>
  );
}

function Pager({ list, pages }: { list: BatchList; pages: number }) {
  if (pages < 2) return null;
  return (
    <nav aria-label="Pages" className="page flex items-center gap-4 py-4">
      {list.page > 1 ? (
        <LinkButton href={hrefOf({ ...list, page: list.page - 1 })}>Page {list.page - 1}</LinkButton>
      ) : null}
      <span>
        Page {list.page} of {pages}
      </span>
      {list.page < pages ? (
        <LinkButton href={hrefOf({ ...list, page: list.page + 1 })}>Page {list.page + 1}</LinkButton>
      ) : null}
    </nav>
  );
}

interface BatchListViewProps {
  /** What the server was asked for, and its answer. */
  list: BatchList;
  initial: BatchPage;
  wires: WireDto[];
}

/**
 * The list of batches as the URL asks for it, kept fresh by the event stream. Filters change the URL at once and by
 * themselves, so that two changes in one breath both count.
 */
export function BatchListView({ list: asked, initial, wires }: BatchListViewProps) {
  const may = useRights();
  const list = batchListSchema.parse(Object.fromEntries(useSearchParams()));
  const isAsked = hrefOf(list) === hrefOf(asked);
  const { data = initial } = useQuery({ ...batchesQuery(list), initialData: isAsked ? initial : undefined });
  const change = (changed: Partial<BatchList>) => {
    const now = batchListSchema.parse(Object.fromEntries(new URLSearchParams(window.location.search)));
    window.history.replaceState(null, '', hrefOf({ ...now, ...changed, page: 1 }));
  };
  return (
    <>
      <PageHead
        title="Batches"
        actions={
          may('batches.write') ? (
            <>
              <LinkButton href={routes.uploadBatch()}>Upload a cut list</LinkButton>
              <LinkButton href={routes.newBatch()} look="ink">
                New batch
              </LinkButton>
            </>
          ) : undefined
        }
      >
        <p aria-live="polite">{counted(data.total, 'batch', 'batches')}</p>
      </PageHead>
      <BatchFilters list={list} wires={wires} onChange={change} />
      {data.batches.length === 0 ? (
        <Nothing list={list} />
      ) : (
        <ul aria-label="Batches">
          {data.batches.map((batch) => (
            <BatchRow key={batch.id} batch={batch} />
          ))}
        </ul>
      )}
      <Pager list={list} pages={data.pages} />
    </>
  );
}
