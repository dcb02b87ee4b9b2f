'use client';

import { useRouter } from 'next/navigation';
import { PageHead } from '@/components/ui/page-head';
import { routes } from '@/lib/routes';
import type { WireDto } from '@/lib/schemas/stock';
import { BatchForm, type BatchFormInput } from './batch-form';
import { newRows, type Usual } from './form-rows';
import { NoWires } from './no-wires';
import { type BatchAction, useAct } from './use-act';

interface NewBatchProps {
  wires: WireDto[];
  usual: Usual;
  create: BatchAction<{ batchId: string }>;
}

/** A batch made by hand. */
export function NewBatch({ wires, usual, create }: NewBatchProps) {
  const router = useRouter();
  const { act, busy, refusal } = useAct(create);
  const save = (queue: boolean) => async (input: BatchFormInput) => {
    const done = await act({ ...input, queue });
    if (done) router.push(routes.batch(done.data.batchId));
  };
  return (
    <>
      <PageHead title="New batch">Lines of one wire, one length and a number of pieces.</PageHead>
      {wires.length === 0 ? (
        <NoWires />
      ) : (
        <BatchForm
          head={{ name: '', due: '', priority: 3 }}
          rows={newRows(usual)}
          wires={wires}
          usual={usual}
          busy={busy}
          refusal={refusal}
          submits={[
            { title: 'Save and queue it', look: 'ink', submit: save(true) },
            { title: 'Save as a draft', submit: save(false) },
          ]}
        />
      )}
    </>
  );
}
