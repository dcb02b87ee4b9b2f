import { WireSwatch } from '@/components/ui/wire-swatch';
import type { WireDto } from '@/lib/schemas/stock';
import { isEarthColour, parseColour } from '@/lib/wire/colour';
import { Row, Rows } from '../sides';

function isEarth({ colour }: WireDto): boolean {
  const parsed = parseColour(colour);
  return parsed !== null && isEarthColour(parsed);
}

/** The kinds of wire, thickest first. */
export function WireRows({ wires }: { wires: WireDto[] }) {
  return (
    <Rows label="Wires" none="No wire yet. Add the kinds of wire that your lists ask for.">
      {wires.map((wire) => (
        <Row key={wire.id} name={<WireSwatch wire={wire} />}>
          {wire.insulation} on {wire.conductor}, {wire.outsideDiameterMm} mm over all
          {isEarth(wire) ? <strong className="block">Kept for protective earth.</strong> : null}
        </Row>
      ))}
    </Rows>
  );
}
