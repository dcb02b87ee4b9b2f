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
    <li className="grid grid-cols-[3.5rem_3.5rem_1fr] items-baseline gap-x-3 py-0.5">
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
    <li className="page grid gap-x-8 gap-y-2 border-b border-line py-3 md:grid-cols-[minmax(180px,240px)_1fr_minmax(300px,420px)]">
      <div>
        <p className="name text-lg break-words">{line.label}</p>
        <p>
          <span className="figure text-lg">
            {line.pieces} × {spokenMm(line.lengthMm)}
          </span>{' '}
          <span className="text-sm text-soft">
            {toleranceWords(line.toleranceMinusMm, line.tolerancePlusMm)}
          </span>
        </p>
        <WireSwatch wire={line.wire} /> <span className="text-sm text-soft">{line.wire.insulation}</span>
      </div>
      <div>
        <CutRule colour={line.wire.colour} pieces={line.pieces} cut={line.cut} bagged={line.bagged} />
        <p className="mt-1 text-sm">
          <span className="font-bold">{line.cut} cut</span>, {line.bagged} in bags
        </p>
      </div>
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
