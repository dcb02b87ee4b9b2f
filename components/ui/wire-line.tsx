import { colourHexes, INSULATION_EDGE_HEX, parseColour } from '@/lib/wire/colour';

/** CSS colours of a wire by its IEC 60757 code; an unknown code is drawn as bare grey. */
export function wireHexes(code: string): string[] {
  const colour = parseColour(code);
  return colour ? colourHexes(colour) : [INSULATION_EDGE_HEX];
}

interface WireLineProps {
  colour: string;
  /** How much of the width the wire covers, 0 to 1. */
  ratio: number;
  heightPx?: number;
}

/** Wire in its insulation colour lying from the left; a second colour winds round it as dashes. */
export function WireLine({ colour, ratio, heightPx = 7 }: WireLineProps) {
  const [base, second] = wireHexes(colour);
  const width = `${Math.min(1, Math.max(0, ratio)) * 100}%`;
  return (
    <svg aria-hidden className="block w-full overflow-visible" height={heightPx}>
      <line
        x1="0"
        x2="100%"
        y1={heightPx / 2}
        y2={heightPx / 2}
        className="stroke-tick"
        strokeDasharray="2 5"
      />
      {ratio > 0 ? (
        <>
          <rect width={width} height={heightPx} fill={base} stroke={INSULATION_EDGE_HEX} strokeWidth="1" />
          {second ? (
            <line
              x1="0"
              x2={width}
              y1={heightPx / 2}
              y2={heightPx / 2}
              stroke={second}
              strokeWidth={heightPx / 2}
              strokeDasharray="8 8"
            />
          ) : null}
        </>
      ) : null}
    </svg>
  );
}
