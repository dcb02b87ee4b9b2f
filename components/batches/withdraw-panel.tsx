'use client';

import { Button } from '@/components/ui/button';
import { Notice } from '@/components/ui/notice';
import { Problem } from '@/components/ui/problem';
import type { BatchDto, LotDto, Withdrawal } from '@/lib/schemas/batches';
import { type BatchAction, useAct } from './use-act';
import { counted } from './words';

function piecesIn(batch: BatchDto, states: readonly LotDto['state'][]): number {
  const lots = batch.lineList.flatMap((line) => line.lots);
  return lots.filter((lot) => states.includes(lot.state)).reduce((sum, lot) => sum + lot.pieces, 0);
}

/** What is cut already and what would stop, said before anything is withdrawn. */
function WhatIsCut({ batch }: { batch: BatchDto }) {
  const running = batch.lineList.flatMap((line) => line.lots).filter((lot) => lot.state === 'running');
  return (
    <ul className="list-disc pl-5">
      <li>
        {batch.cut > 0
          ? `${counted(batch.cut, 'piece is', 'pieces are')} cut already and ${batch.cut === 1 ? 'stays' : 'stay'} counted, ${batch.bagged.toLocaleString('en-GB')} of them in bags.`
          : 'Nothing of it is cut yet.'}
      </li>
      {running.map((lot) => (
        <li key={lot.id}>
          {lot.rigName} is cutting {lot.cut} of {lot.pieces} and finishes its lot. To end it sooner, stop it
          at the rig.
        </li>
      ))}
      <li>{counted(piecesIn(batch, ['waiting', 'given']), 'piece', 'pieces')} would not be cut any more.</li>
    </ul>
  );
}

function Withdrawn({ withdrawal }: { withdrawal: Withdrawal }) {
  const { withdrawnPieces, cutPieces, stillCutting } = withdrawal;
  return (
    <Notice title="Withdrawn.">
      <p>
        {counted(withdrawnPieces, 'piece')} will not be cut. {counted(cutPieces, 'piece is', 'pieces are')}{' '}
        cut.
      </p>
      {stillCutting.map(({ rigName, pieces, cut }) => (
        <p key={rigName}>
          {rigName} finishes its lot: {cut} of {pieces} are cut.
        </p>
      ))}
    </Notice>
  );
}

interface WithdrawPanelProps {
  batch: BatchDto;
  withdraw: BatchAction<Withdrawal>;
  withdrawal: Withdrawal | null;
  onWithdrawn: (withdrawal: Withdrawal) => void;
  onKeep: () => void;
}

/** Asks once more, with what is cut in view; then says what was withdrawn. */
export function WithdrawPanel({ batch, withdraw, withdrawal, onWithdrawn, onKeep }: WithdrawPanelProps) {
  const { act, busy, refusal } = useAct(withdraw);
  if (withdrawal) return <Withdrawn withdrawal={withdrawal} />;

  async function confirm() {
    const done = await act({ batchId: batch.id });
    if (done) onWithdrawn(done.data);
  }

  return (
    <Notice title={`Withdraw ${batch.name}?`}>
      <WhatIsCut batch={batch} />
      {refusal ? <Problem {...refusal} /> : null}
      <div className="mt-3 flex flex-wrap gap-3">
        <Button look="signal" disabled={busy} onClick={() => void confirm()}>
          Withdraw what is not cut
        </Button>
        <Button onClick={onKeep}>Keep it</Button>
      </div>
    </Notice>
  );
}
