import { toleranceWords } from '@/components/rig/words';
import { WireLine } from '@/components/ui/wire-line';
import { WireSwatch } from '@/components/ui/wire-swatch';
import type { CutListLine } from '@/lib/wire/cut-list/reading';
import { spokenMm } from '@/lib/wire/length';

function Unread() {
  return <span aria-label="not understood" role="img" className="hatch inline-block h-4 w-10 align-middle" />;
}

function Tolerance({ line }: { line: CutListLine }) {
  const { toleranceMinusMm, tolerancePlusMm } = line;
  if (toleranceMinusMm === null || tolerancePlusMm === null) return <Unread />;
  return toleranceWords(toleranceMinusMm, tolerancePlusMm);
}

/** Every line as it was understood, drawn to the length of the longest; what was not is hatched. */
export function UploadLines({ lines }: { lines: readonly CutListLine[] }) {
  const longestMm = Math.max(1, ...lines.map((line) => line.lengthMm ?? 0));
  return (
    <div className="overflow-x-auto">
      <table className="w-full text-left">
        <caption className="sr-only">The lines as they were understood</caption>
        <thead>
          <tr className="border-b border-ink text-sm">
            <th className="py-1 pr-4">Row</th>
            <th className="py-1 pr-4">Label</th>
            <th className="py-1 pr-4">Wire</th>
            <th className="py-1 pr-4 text-right">Pieces</th>
            <th className="py-1 pr-4 text-right">Length</th>
            <th className="py-1 pr-4">Tolerance</th>
            <th className="hidden w-1/3 py-1 lg:table-cell">One piece</th>
          </tr>
        </thead>
        <tbody>
          {lines.map((line) => (
            <tr key={line.row} className="border-b border-line">
              <td className="figure py-1.5 pr-4 text-soft">{line.row}</td>
              <td className="py-1.5 pr-4 font-bold break-words">{line.label ?? <Unread />}</td>
              <td className="py-1.5 pr-4">
                {line.wire ? (
                  <>
                    <WireSwatch wire={line.wire} />{' '}
                    <span className="text-sm text-soft">{line.wire.insulation}</span>
                  </>
                ) : (
                  <Unread />
                )}
              </td>
              <td className="figure py-1.5 pr-4 text-right">{line.pieces ?? <Unread />}</td>
              <td className="figure py-1.5 pr-4 text-right whitespace-nowrap">
                {line.lengthMm === null ? <Unread /> : spokenMm(line.lengthMm)}
              </td>
              <td className="py-1.5 pr-4 text-sm whitespace-nowrap">
                <Tolerance line={line} />
              </td>
              <td className="hidden py-1.5 lg:table-cell">
                {line.lengthMm !== null && line.wire ? (
                  <WireLine colour={line.wire.colour} ratio={line.lengthMm / longestMm} />
                ) : null}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
