import { Rule } from '@/components/ui/rule';
import { WireLine } from '@/components/ui/wire-line';
import { Spool } from './spool';

interface StripProps {
  /** IEC 60757 letters of the loaded wire; null: no spool. */
  colour: string | null;
  /** What is left on the spool, 0 to 1. */
  spoolFill: number;
  pieces: number;
  cut: number;
  /** What lies in the tray. */
  tray: number;
  /** Older than its limit: drawn faint and said so beside it. */
  stale?: boolean;
}

/** The rig as a rule: spool, wire as far as it is cut, jaws at the count, tray with its number. */
export function Strip({ colour, spoolFill, pieces, cut, tray, stale = false }: StripProps) {
  const ratio = pieces > 0 ? cut / pieces : 0;
  return (
    <div
      role="img"
      aria-label={pieces > 0 ? `${cut} of ${pieces} pieces cut, ${tray} in the tray` : 'no lot'}
      className={`grid grid-cols-[44px_1fr_62px] items-center gap-x-1 ${stale ? 'opacity-45' : ''}`}
    >
      <Spool colour={colour} fill={spoolFill} />
      <div className="relative h-[52px]">
        <div className="absolute top-[13px] right-full w-[18px]">
          <WireLine colour={colour ?? ''} ratio={colour ? 1 : 0} />
        </div>
        <div className="absolute inset-x-0 top-[13px]">
          <WireLine colour={colour ?? ''} ratio={colour ? ratio : 0} />
        </div>
        <svg aria-hidden className="absolute inset-x-0 top-0 h-8 w-full overflow-visible">
          <svg x={`${ratio * 100}%`} className="overflow-visible">
            <path d="M-8 0H8L0 12Z M-8 32H8L0 20Z" className="fill-ink" />
          </svg>
        </svg>
        <div className="absolute inset-x-0 bottom-0">
          {pieces > 0 ? <Rule max={pieces} labelsMost={5} /> : null}
        </div>
      </div>
      <div className="figure ml-2 flex h-9 items-end justify-center self-end border-2 border-t-0 border-ink pb-0.5 text-lg">
        {tray}
      </div>
    </div>
  );
}
