import { INSULATION_EDGE_HEX } from '@/lib/wire/colour';
import { wireHexes } from '@/components/ui/wire-line';

/** A spool seen from the side, as full as it is; empty flanges where none is loaded. `fill` is 0 to 1. */
export function Spool({ colour, fill }: { colour: string | null; fill: number }) {
  const height = 8 + 26 * Math.min(1, Math.max(0, fill));
  return (
    <svg aria-hidden width="30" height="46" viewBox="0 0 30 46" className="block overflow-visible">
      {colour ? (
        <rect
          x="7"
          y={23 - height / 2}
          width="16"
          height={height}
          fill={wireHexes(colour)[0]}
          stroke={INSULATION_EDGE_HEX}
        />
      ) : (
        <path d="M7 23H23" className="stroke-tick" strokeDasharray="2 3" />
      )}
      <ellipse cx="6" cy="23" rx="5" ry="22" className="fill-sheet stroke-ink" />
      <ellipse cx="24" cy="23" rx="5" ry="22" className="fill-sheet stroke-ink" />
    </svg>
  );
}
