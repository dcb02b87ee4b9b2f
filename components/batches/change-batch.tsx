'use client';

import { useRouter } from 'next/navigation';
import { useLive } from '@/components/live/live-provider';
import { Notice } from '@/components/ui/notice';
import { PageHead } from '@/components/ui/page-head';
import { wallTimeOf } from '@/lib/plan/wall-time';
import { routes } from '@/lib/routes';
import type { BatchDto } from '@/lib/schemas/batches';
import type { WireDto } from '@/lib/schemas/stock';
import { BatchForm, type BatchFormInput } from './batch-form';
import { rowsOfBatch, type Usual } from './form-rows';
import { type BatchAction, useAct } from './use-act';
import { counted } from './words';

interface ChangeBatchProps {
  batch: BatchDto;
  wires: WireDto[];
  usual: Usual;
  change: BatchAction<void>;
}

/** A batch as it stands, to be changed; what is cut of it is said and stays. */
export function ChangeBatch({ batch, wires, usual, change }: ChangeBatchProps) {
  const router = useRouter();
  const { timeZone } = useLive();
  const { act, busy, refusal } = useAct(change);
  const due = batch.dueAt === null ? '' : wallTimeOf(batch.dueAt, timeZone);
  async function save(input: BatchFormInput) {
    const done = await act({ ...input, batchId: batch.id, revision: batch.revision });
    if (done) router.push(routes.batch(batch.id));
  }
  return (
    <>
      <PageHead title={`Change ${batch.name}`}>
        Batch {batch.number}. Lots that wait are made to fit.
      </PageHead>
      {batch.cut > 0 ? (
        <Notice title={`${counted(batch.cut, 'piece is', 'pieces are')} cut already and stay counted.`}>
          <p>{counted(batch.bagged, 'piece is', 'pieces are')} in bags.</p>
        </Notice>
      ) : null}
      <BatchForm
        head={{ name: batch.name, due, priority: batch.priority }}
        rows={rowsOfBatch(batch)}
        wires={wires}
        usual={usual}
        busy={busy}
        refusal={refusal}
        submits={[{ title: 'Save the changes', look: 'ink', submit: save }]}
      />
    </>
  );
}
