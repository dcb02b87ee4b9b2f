'use client';

import { useQuery } from '@tanstack/react-query';
import { PageHead } from '@/components/ui/page-head';
import { batchQuery } from '@/lib/queries/batches';
import type { BatchDto } from '@/lib/schemas/batches';
import { type BatchActions, BatchActs } from './batch-acts';
import { Due } from './due';
import { LineRow } from './line-row';
import { BATCH_STATE_WORDS, counted } from './words';

function sentence(batch: BatchDto): string {
  const left = batch.pieces - batch.bagged;
  const pieces = batch.pieces.toLocaleString('en-GB');
  switch (batch.state) {
    case 'draft':
      return `${counted(batch.lines, 'line')}, ${pieces} pieces. No rig gets it before it is queued.`;
    case 'queued':
      return `${counted(batch.lines, 'line')}, ${pieces} pieces, none begun.`;
    case 'cutting':
      return `${batch.cut.toLocaleString('en-GB')} of ${pieces} pieces cut, ${batch.bagged.toLocaleString('en-GB')} in bags, ${left.toLocaleString('en-GB')} to go.`;
    case 'done':
      return `All in bags: ${batch.bagged.toLocaleString('en-GB')} pieces.`;
    case 'withdrawn':
      return `${batch.cut.toLocaleString('en-GB')} of ${pieces} pieces were cut, ${batch.bagged.toLocaleString('en-GB')} are in bags.`;
  }
}

/** One batch, live: its state in a sentence, what may be done, its lines as wire on rules. */
export function BatchView({ initial, actions }: { initial: BatchDto; actions: BatchActions }) {
  const { data: batch } = useQuery({ ...batchQuery(initial.id), initialData: initial });
  return (
    <>
      <PageHead title={batch.name}>
        <p className="text-lg text-ink" aria-live="polite">
          <span className="font-bold">{BATCH_STATE_WORDS[batch.state]}.</span> {sentence(batch)}
        </p>
        <p>
          Batch {batch.number}, priority {batch.priority}, <Due batch={batch} />. By {batch.createdByName}
          {batch.sourceName ? (
            <>
              {' '}
              from <span className="font-mono text-sm">{batch.sourceName}</span>
            </>
          ) : null}
          .
        </p>
      </PageHead>
      <BatchActs batch={batch} actions={actions} />
      <ul aria-label="Lines">
        {batch.lineList.map((line) => (
          <LineRow key={line.id} line={line} />
        ))}
      </ul>
    </>
  );
}
