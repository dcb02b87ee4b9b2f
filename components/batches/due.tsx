'use client';

import { useLive } from '@/components/live/live-provider';
import { wallClock } from '@/components/live/time';
import type { BatchSummaryDto } from '@/lib/schemas/batches';
import { isOverdue } from './words';

/** When a batch is due, on the workshop's clock; hatched and said once that is past with work left. */
export function Due({ batch }: { batch: Pick<BatchSummaryDto, 'dueAt' | 'state'> }) {
  const { nowMs, timeZone } = useLive();
  if (batch.dueAt === null) return <span className="text-soft">no due time</span>;
  const overdue = isOverdue(batch, nowMs);
  return (
    <span className="inline-flex items-center gap-2">
      {overdue ? <span aria-hidden className="hatch h-4 w-6 shrink-0" /> : null}
      <span className={overdue ? 'font-bold' : ''}>
        {overdue ? 'overdue since' : 'due'} {wallClock(batch.dueAt, timeZone, nowMs)}
      </span>
    </span>
  );
}
