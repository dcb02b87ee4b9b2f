import type { Profile } from './profile';
import { readEnd, readHome, readPiece, readPreamble, readRegister, readTrim } from './reading/parts-reader';
import { type Carried, PartRefused, SectionReader } from './reading/section-reader';
import { MOST_PROBLEMS, type Section, sectionsOf } from './reading/sections';
import type { ProgramProblem, ProgramReading, ProgramStep, ReadProgram } from './steps';

/** Lets one part be read to its first line that is out of place, and says whether it came to its end. */
function readThrough(reader: SectionReader, read: () => void): void {
  try {
    read();
    reader.close();
  } catch (error) {
    if (!(error instanceof PartRefused)) throw error;
  }
}

interface Walk {
  profile: Profile;
  problems: ProgramProblem[];
  program: ReadProgram;
  carried: Carried;
  /** E units of the first piece: every piece of a run has the same length. */
  pieceUnits: number | null;
}

function readPieceSection(walk: Walk, reader: SectionReader, section: Section): void {
  const { profile, program } = walk;
  const fedUnits = readPiece(reader, profile, section.piece ?? 0, program.tag);
  walk.pieceUnits ??= fedUnits;
  if (fedUnits !== walk.pieceUnits) reader.complain('This piece is not as long as the first.');
}

function readSection(walk: Walk, section: Section): ProgramStep[] {
  const { profile, problems, program } = walk;
  const reader = new SectionReader(section, profile, problems, walk.carried);
  readThrough(reader, () => {
    switch (section.part) {
      case 'preamble':
        return readPreamble(reader, profile);
      case 'home':
        return readHome(reader, profile);
      case 'trim':
        return readTrim(reader, profile);
      case 'register':
        program.tag = readRegister(reader);
        return undefined;
      case 'piece':
        return readPieceSection(walk, reader, section);
      case 'end':
        return readEnd(reader, profile);
    }
  });
  return reader.steps;
}

/**
 * Reads a program for a rig with this profile and judges every line: a closed grammar, each part whole and in
 * order, each move within limits, the jaws open while wire is fed, motion awaited and asked for before a piece
 * counts. Shares no code with the generator. Gives the steps, or up to 20 problems with their line numbers.
 */
export function readProgram(text: string, profile: Profile): ProgramReading {
  const { sections, problems } = sectionsOf(text);
  const program: ReadProgram = {
    tag: null,
    preamble: [],
    home: [],
    trim: [],
    register: [],
    pieces: [],
    end: [],
  };
  // Where lines are unreadable or parts out of order, reading on would only echo that.
  if (problems.length > 0) return { ok: false, problems: problems.slice(0, MOST_PROBLEMS) };
  // Where the cut axis stands before it is homed is unknown; no move may come before its declaration.
  const carried = { cutAxisMm: Number.NaN, pendingMs: 0, known: new Map<string, ProgramStep>() };
  const walk: Walk = { profile, problems, program, carried, pieceUnits: null };
  for (const section of sections) {
    const steps = readSection(walk, section);
    if (section.part === 'piece') program.pieces.push(steps);
    else program[section.part] = steps;
    if (problems.length >= MOST_PROBLEMS) break;
  }
  if (problems.length > 0) return { ok: false, problems: problems.slice(0, MOST_PROBLEMS) };
  return { ok: true, program };
}
