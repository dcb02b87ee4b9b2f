import { Rule } from '@/components/ui/rule';
import { WireLine } from '@/components/ui/wire-line';

interface CutRuleProps {
  /** IEC 60757 letters; null for several wires together, drawn in ink. */
  colour: string | null;
  pieces: number;
  cut: number;
  bagged: number;
}

function share(part: number, whole: number): number {
  return whole > 0 ? Math.min(1, part / whole) : 0;
}

/** Pieces as wire on a rule: the wire lies as far as is cut, the bracket beneath it as far as is in bags. */
export function CutRule({ colour, pieces, cut, bagged }: CutRuleProps) {
  const inBags = `${share(bagged, pieces) * 100}%`;
  return (
    <div
      role="img"
      aria-label={`${cut} of ${pieces} pieces cut, ${bagged} in bags`}
      className="relative h-10 overflow-x-clip overflow-y-visible"
    >
      <div className="absolute inset-x-0 top-1">
        {colour === null ? (
          <svg aria-hidden className="block h-[7px] w-full">
            <line x1="0" x2="100%" y1="3.5" y2="3.5" className="stroke-tick" strokeDasharray="2 5" />
            <rect width={`${share(cut, pieces) * 100}%`} height="7" className="fill-ink" />
          </svg>
        ) : (
          <WireLine colour={colour} ratio={share(cut, pieces)} />
        )}
      </div>
      {bagged > 0 ? (
        <svg aria-hidden className="absolute inset-x-0 top-[13px] h-2 w-full overflow-visible">
          <path d="M0.5 0V4" className="stroke-ink" />
          <line x1="0" x2={inBags} y1="4" y2="4" className="stroke-ink" strokeWidth="1.5" />
          <line x1={inBags} x2={inBags} y1="0" y2="4" className="stroke-ink" strokeWidth="1.5" />
        </svg>
      ) : null}
      <div className="absolute inset-x-0 bottom-0">
        <Rule max={pieces} />
      </div>
    </div>
  );
}
