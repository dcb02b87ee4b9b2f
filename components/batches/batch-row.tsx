import Link from 'next/link';
import { WireSwatch } from '@/components/ui/wire-swatch';
import { routes } from '@/lib/routes';
import type { BatchSummaryDto } from '@/lib/schemas/batches';
import { CutRule } from './cut-rule';
import { Due } from './due';
import { BATCH_STATE_WORDS, counted } from './words';

const WIRES_SHOWN = 4;

/** One batch of the list: its name leads to it, its wire lies on a rule as far as it is cut. */
export function BatchRow({ batch }: { batch: BatchSummaryDto }) {
  const [wire, second] = batch.wires;
  const more = batch.wires.length - WIRES_SHOWN;
  return (
    <li className="page relative grid grid-cols-1 items-center gap-x-8 gap-y-2 border-b border-line py-3 hover:bg-sheet md:grid-cols-[minmax(200px,280px)_1fr_minmax(180px,240px)]">
      <div>
        <p>
          <Link href={routes.batch(batch.id)} className="name text-lg after:absolute after:inset-0">
            {batch.name}
          </Link>{' '}
          <span className="text-soft">no. {batch.number}</span>
        </p>
        <p>
          <span className="font-bold">{BATCH_STATE_WORDS[batch.state]}</span>{' '}
          <span className="text-soft">
            {counted(batch.lines, 'line')}, priority {batch.priority}
          </span>
        </p>
        {batch.waitingReason ? <p className="text-sm text-soft">{batch.waitingReason}</p> : null}
      </div>
      <div>
        <CutRule
          colour={wire && !second ? wire.colour : null}
          pieces={batch.pieces}
          cut={batch.cut}
          bagged={batch.bagged}
        />
        <p className="mt-1 flex flex-wrap gap-x-4 text-sm">
          {batch.wires.slice(0, WIRES_SHOWN).map((one) => (
            <WireSwatch key={one.id} wire={one} />
          ))}
          {more > 0 ? <span className="text-soft">and {more} more</span> : null}
        </p>
      </div>
      <div className="md:text-right">
        <p>
          <span className="figure text-lg">{batch.cut.toLocaleString('en-GB')}</span>{' '}
          <span className="text-soft">of {batch.pieces.toLocaleString('en-GB')} cut</span>
        </p>
        <p>
          <Due batch={batch} />
        </p>
      </div>
    </li>
  );
}
