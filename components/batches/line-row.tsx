import Link from 'next/link';
import { toleranceWords } from '@/components/rig/words';
import { WireSwatch } from '@/components/ui/wire-swatch';
import { routes } from '@/lib/routes';
import type { BatchLineDto, LotDto } from '@/lib/schemas/batches';
import { spokenMm } from '@/lib/wire/length';
import { CutRule } from './cut-rule';
import { lotWords } from './words';

function Lot({ lot }: { lot: LotDto }) {
  const onRig = lot.rigId !== null && lot.state !== 'bagged';
  return (
    <li className="grid grid-cols-[2.8rem_2.2rem_1fr] items-baseline gap-x-3 py-0.5">
      <span className="text-soft">lot {lot.number}</span>
      <span className="figure text-right">{lot.pieces}</span>
      <span>
        {lotWords(lot)}{' '}
        {onRig && lot.rigId ? (
          <Link href={routes.rig(lot.rigId)} className="underline">
            Open {lot.rigName}
          </Link>
        ) : null}
        {lot.bagCode && lot.runId ? (
          <Link href={routes.label(lot.runId)} className="underline">
            Label
          </Link>
        ) : null}
      </span>
    </li>
  );
}

/** One line of a batch: what is to be cut, drawn as wire on a rule, and where its lots are. */
export function LineRow({ line }: { line: BatchLineDto }) {
  return (
    <li className="page grid items-start gap-x-8 gap-y-1 border-b border-line py-2.5 md:grid-cols-[minmax(230px,290px)_1fr_7rem_minmax(280px,400px)]">
      <div>
        <p className="flex flex-wrap items-baseline gap-x-3">
          <span className="name text-lg break-words">{line.label}</span>
          <WireSwatch wire={line.wire} />
        </p>
        <p>
          <span className="figure text-lg">
            {line.pieces} × {spokenMm(line.lengthMm)}
          </span>{' '}
          <span className="text-sm text-soft">
            {toleranceWords(line.toleranceMinusMm, line.tolerancePlusMm)}, {line.wire.insulation}
          </span>
        </p>
      </div>
      <CutRule colour={line.wire.colour} pieces={line.pieces} cut={line.cut} bagged={line.bagged} />
      <p className="text-sm md:text-right">
        <span className="figure text-lg">{line.cut}</span> cut
        <span className="text-soft md:block">
          <span className="md:hidden">, </span>
          {line.bagged} in bags
        </span>
      </p>
      {line.lots.length > 0 ? (
        <ul aria-label={`Lots of ${line.label}`} className="text-sm">
          {line.lots.map((lot) => (
            <Lot key={lot.id} lot={lot} />
          ))}
        </ul>
      ) : (
        <p className="text-sm text-soft">No lots: it is not queued yet.</p>
      )}
    </li>
  );
}
