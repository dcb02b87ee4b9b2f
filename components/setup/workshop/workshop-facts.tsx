import type { WorkshopDto } from '@/lib/schemas/setup-workshop';

/** The settings for those who may read and not change them. */
export function WorkshopFacts({ workshop }: { workshop: WorkshopDto }) {
  const facts: [string, string][] = [
    ['Name', workshop.name],
    ['Time zone', workshop.timeZone],
    ['Shifts begin at', workshop.shiftStarts.join(', ')],
    ['First pieces to measure', String(workshop.firstPieces)],
    ['Most pieces in one lot', String(workshop.lotPiecesMost)],
    ['Usual tolerance', `−${workshop.toleranceMinusMm} / +${workshop.tolerancePlusMm} mm`],
  ];
  return (
    <dl className="border-t border-line">
      {facts.map(([name, value]) => (
        <div key={name} className="grid grid-cols-2 gap-4 border-b border-line py-3">
          <dt className="text-soft">{name}</dt>
          <dd>{value}</dd>
        </div>
      ))}
    </dl>
  );
}
