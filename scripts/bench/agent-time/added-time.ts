/** A chunk of text on the line between agent and rig; `atMs` by any clock that only goes forward. */
export interface Passed {
  towards: 'rig' | 'agent';
  atMs: number;
  text: string;
}

/** What the agent added to one piece, ms: in all, and before lines of each kind (`G1 E`, `G1 Z5.5`, `M400`). */
export interface AddedTime {
  totalMs: number;
  byLine: Record<string, number>;
}

/** Tag times 10,000 plus the piece (design.md 5); 0 opens the run. */
const REGISTER = /^G92 [XYZ](\d+) E0$/;
const REGISTER_PER_TAG = 10_000;

/** Whole lines with the time of the chunk that ended them, without line number and sum. */
function linesOf(traffic: readonly Passed[]): Passed[] {
  const rest = { rig: '', agent: '' };
  return traffic.flatMap(({ towards, atMs, text }) => {
    const parts = (rest[towards] + text).split('\n');
    rest[towards] = parts.pop() ?? '';
    return parts.map((line) => ({
      towards,
      atMs,
      text: line
        .trimEnd()
        .replace(/^N\d+ /, '')
        .replace(/\*\d+$/, ''),
    }));
  });
}

/** Feeds and register lines differ from piece to piece and go by their axis: `G1 E60 F3000` is a `G1 E`. */
function kindOf(line: string): string {
  const [command = '', word = ''] = line.split(' ');
  const changes = command === 'G92' || word.startsWith('E');
  return [command, changes ? word.charAt(0) : word].join(' ').trim();
}

/**
 * What the agent adds to each piece: from the answer that ended the last line to the writing of the next, summed over
 * all lines from one register line to the next, readings of the switches in between included. A line that is written
 * again without an answer adds nothing: there the rig was silent. Several runs may follow one another.
 */
export function addedPerPiece(traffic: readonly Passed[]): AddedTime[] {
  const pieces: AddedTime[] = [];
  let answeredAtMs: number | null = null;
  let piece: AddedTime = { totalMs: 0, byLine: {} };
  let inRun = false;
  for (const { towards, atMs, text } of linesOf(traffic)) {
    if (towards === 'agent') {
      if (text.startsWith('ok')) answeredAtMs = atMs;
      continue;
    }
    const gapMs = answeredAtMs === null ? 0 : atMs - answeredAtMs;
    const kind = kindOf(text);
    answeredAtMs = null;
    piece.totalMs += gapMs;
    piece.byLine[kind] = (piece.byLine[kind] ?? 0) + gapMs;
    const register = REGISTER.exec(text)?.[1];
    if (register === undefined) continue;
    const opens = Number(register) % REGISTER_PER_TAG === 0;
    if (inRun && !opens) pieces.push(piece);
    inRun = true;
    piece = { totalMs: 0, byLine: {} };
  }
  return pieces;
}
