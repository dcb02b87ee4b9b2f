import { PROGRAM_PARTS, type ProgramPart, type ProgramProblem } from '../steps';
import { lexLine, type SourceLine } from './lex';
import type { Command } from './meaning';

/** The lines below one marker. `lineNumber` is the marker's. */
export interface Section {
  part: ProgramPart;
  piece: number | null;
  lineNumber: number;
  commands: Command[];
}

const MOST_PIECES = 9999;

/** More problems than this tell a person nothing new. */
export const MOST_PROBLEMS = 20;

/** Takes the text apart into lines; stops at the twentieth that is refused. */
function lexText(text: string): { lines: SourceLine[]; problems: ProgramProblem[] } {
  const lines: SourceLine[] = [];
  const problems: ProgramProblem[] = [];
  const texts = (text.endsWith('\n') ? text.slice(0, -1) : text).split('\n');
  for (const [index, lineText] of texts.entries()) {
    const line = lexLine(lineText, index + 1);
    if (typeof line !== 'string') lines.push(line);
    else problems.push({ lineNumber: index + 1, message: line });
    if (problems.length === MOST_PROBLEMS) break;
  }
  return { lines, problems };
}

function orderProblems(sections: Section[]): ProgramProblem[] {
  const pieces = sections.filter((section) => section.part === 'piece');
  const wanted = PROGRAM_PARTS.flatMap((part) =>
    part === 'piece' ? pieces.map((_, index) => `piece ${index + 1}`) : [part],
  );
  const found = sections.map(({ part, piece }) => (piece === null ? part : `piece ${piece}`));
  const at = Array.from({ length: Math.max(wanted.length, found.length) }).findIndex(
    (_, index) => wanted[index] !== found[index],
  );
  if (at >= 0) {
    const message = `Here stands ${found[at] ?? 'nothing'}, and ${wanted[at] ?? 'nothing'} should.`;
    return [{ lineNumber: sections[at]?.lineNumber ?? 1, message }];
  }
  if (pieces.length >= 1 && pieces.length <= MOST_PIECES) return [];
  return [{ lineNumber: 1, message: `A program has 1 to ${MOST_PIECES} pieces, this one ${pieces.length}.` }];
}

/** Sorts the lines under their markers, and says what is unreadable, out of order or missing. */
export function sectionsOf(text: string): { sections: Section[]; problems: ProgramProblem[] } {
  const { lines, problems } = lexText(text);
  const sections: Section[] = [];
  for (const line of lines) {
    if (line.is === 'marker') {
      const { part, piece, lineNumber } = line;
      sections.push({ part, piece, lineNumber, commands: [] });
    } else {
      const section = sections.at(-1);
      if (section) section.commands.push(line);
      else problems.push({ lineNumber: line.lineNumber, message: 'No part is marked before this line.' });
    }
  }
  return { sections, problems: [...problems, ...orderProblems(sections)] };
}
