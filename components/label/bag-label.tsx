import { WireSwatch } from '@/components/ui/wire-swatch';
import type { BagDto } from '@/lib/schemas/run';
import { colourName, parseColour } from '@/lib/wire/colour';
import { toleranceWords } from '@/components/rig/words';

interface BagLabelProps {
  bag: BagDto;
  /** The bag's code as a barcode, an SVG drawing of our own making. */
  barcodeSvg: string;
  /** When it was bagged, on the workshop's wall clock. */
  at: string;
}

/** The label of a bag, 90 × 55 mm, black on white whatever the screen's set. */
export function BagLabel({ bag, barcodeSvg, at }: BagLabelProps) {
  const colour = parseColour(bag.wire.colour);
  return (
    <article
      aria-label={`Label of bag ${bag.code}`}
      className="label grid h-[55mm] w-[90mm] grid-cols-[1fr_24mm] gap-x-[3mm] overflow-hidden border border-black bg-white p-[3mm] text-[3mm] leading-tight text-black"
    >
      <div className="grid content-between">
        <div>
          <p className="name text-[5mm]">{bag.batchName}</p>
          <p>
            batch {bag.batchNumber}, lot {bag.lotNumber}, {bag.lineLabel}
          </p>
        </div>
        <p className="figure text-[9mm]">
          {bag.pieces} × {bag.lengthMm} mm
        </p>
        <p>
          <WireSwatch wire={bag.wire} /> {colour ? `${colourName(colour)}, ` : ''}
          {bag.wire.insulation}, {toleranceWords(bag.toleranceMinusMm, bag.tolerancePlusMm)}
        </p>
        <p>
          {bag.rigName} · blade {bag.bladeLabel ?? 'not entered'} · spool {bag.spoolLabel ?? 'not entered'}
          <br />
          {bag.clearedByName} · {at}
        </p>
      </div>
      <div className="grid content-between justify-items-end">
        <div className="w-[24mm]" dangerouslySetInnerHTML={{ __html: barcodeSvg }} />
        <p className="font-mono text-right text-[2.6mm] break-all">{bag.code}</p>
      </div>
    </article>
  );
}
