'use client';

import { useRouter } from 'next/navigation';
import { useState } from 'react';
import { useRights } from '@/components/shell/rights';
import { Button, LinkButton } from '@/components/ui/button';
import { Problem } from '@/components/ui/problem';
import { routes } from '@/lib/routes';
import type { BatchDto, Withdrawal } from '@/lib/schemas/batches';
import { type BatchAction, useAct } from './use-act';
import { WithdrawPanel } from './withdraw-panel';

/** What may be done with one batch; the page hands the actions down. */
export interface BatchActions {
  queue: BatchAction<void>;
  withdraw: BatchAction<Withdrawal>;
  duplicate: BatchAction<{ batchId: string }>;
}

/** The buttons of a batch's page, for people who may use them. */
export function BatchActs({ batch, actions }: { batch: BatchDto; actions: BatchActions }) {
  const may = useRights();
  const router = useRouter();
  const queue = useAct(actions.queue);
  const duplicate = useAct(actions.duplicate);
  const [withdrawing, setWithdrawing] = useState(false);
  const [withdrawal, setWithdrawal] = useState<Withdrawal | null>(null);
  if (!may('batches.write')) return null;
  const open = batch.state !== 'withdrawn';
  const refusal = queue.refusal ?? duplicate.refusal;

  async function copy() {
    const done = await duplicate.act({ batchId: batch.id });
    if (done) router.push(routes.changeBatch(done.data.batchId));
  }

  return (
    <section aria-label="What to do with it" className="page grid gap-4 border-b border-line py-4">
      <div className="flex flex-wrap gap-3">
        {batch.state === 'draft' ? (
          <Button look="ink" disabled={queue.busy} onClick={() => void queue.act({ batchId: batch.id })}>
            Queue it for the rigs
          </Button>
        ) : null}
        {open ? <LinkButton href={routes.changeBatch(batch.id)}>Change it</LinkButton> : null}
        <Button disabled={duplicate.busy} onClick={() => void copy()}>
          Make another like it
        </Button>
        {open && batch.state !== 'done' ? (
          <Button aria-expanded={withdrawing} onClick={() => setWithdrawing(!withdrawing)}>
            Withdraw it
          </Button>
        ) : null}
      </div>
      {refusal ? <Problem {...refusal} /> : null}
      {withdrawing || withdrawal ? (
        <WithdrawPanel
          batch={batch}
          withdraw={actions.withdraw}
          withdrawal={withdrawal}
          onWithdrawn={(answer) => {
            setWithdrawal(answer);
            setWithdrawing(false);
          }}
          onKeep={() => setWithdrawing(false)}
        />
      ) : null}
    </section>
  );
}
