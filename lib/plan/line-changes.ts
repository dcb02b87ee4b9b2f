import type { FieldProblem } from '@/lib/errors';
import type { ChangedLine } from '@/lib/schemas/batches';

/** A line as it stands, with the pieces of it that are cut or on a rig. */
export interface StandingLine {
  id: string;
  label: string;
  wireId: string;
  lengthMm: number;
  toleranceMinusMm: number;
  tolerancePlusMm: number;
  committed: number;
}

const FIXED = ['wireId', 'lengthMm', 'toleranceMinusMm', 'tolerancePlusMm'] as const;

function problemsOfLine(line: ChangedLine, standing: StandingLine, path: string): FieldProblem[] {
  const { committed } = standing;
  if (committed === 0) return [];
  const begun = `${committed} pieces of this line are cut or on a rig.`;
  const fixed = FIXED.filter((name) => line[name] !== standing[name]).map((name) => ({
    path: `${path}.${name}`,
    message: `${begun} Leave it, and add another line.`,
  }));
  if (line.pieces >= committed) return fixed;
  return [...fixed, { path: `${path}.pieces`, message: `${begun} Write at least ${committed}.` }];
}

/**
 * What a change may not do to lines that are cut in part: become another wire, length or tolerance, have fewer pieces
 * than are cut or on rigs, or go away. Empty when the change may be made.
 */
export function problemsOfChange(
  lines: readonly ChangedLine[],
  standing: ReadonlyMap<string, StandingLine>,
): FieldProblem[] {
  const kept = new Set(lines.map(({ id }) => id));
  const ofLines = lines.flatMap((line, index) => {
    const before = line.id === null ? undefined : standing.get(line.id);
    return before ? problemsOfLine(line, before, `lines.${index}`) : [];
  });
  const taken = [...standing.values()].filter((line) => !kept.has(line.id) && line.committed > 0);
  return [
    ...ofLines,
    ...taken.map(({ label, committed }) => ({
      path: 'lines',
      message: `${label} cannot go: ${committed} pieces of it are cut or on a rig. Set it to ${committed} instead.`,
    })),
  ];
}
