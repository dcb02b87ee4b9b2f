import { INSULATION_EDGE_HEX } from '@/lib/wire/colour';
import { wireName } from '@/lib/wire/name';
import { wireHexes } from './wire-line';

/** A short piece of the wire and its name: colour never stands without its letters. */
export function WireSwatch({ wire }: { wire: { gaugeAwg: number; colour: string } }) {
  const [base, second] = wireHexes(wire.colour);
  return (
    <span className="inline-flex items-center gap-2 whitespace-nowrap">
      <svg aria-hidden width="28" height="8" className="shrink-0">
        <rect x="0.5" y="0.5" width="27" height="7" fill={base} stroke={INSULATION_EDGE_HEX} />
        {second ? <path d="M0 4H28" stroke={second} strokeWidth="3" strokeDasharray="5 5" /> : null}
      </svg>
      <span className="font-mono text-[0.95em]">{wireName(wire)}</span>
    </span>
  );
}
