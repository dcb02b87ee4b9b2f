/** The parts of a program, in order; the text names each with a comment `;@ part` (pieces: `;@ piece 7`). */
export const PROGRAM_PARTS = ['preamble', 'home', 'trim', 'register', 'piece', 'end'] as const;
export type ProgramPart = (typeof PROGRAM_PARTS)[number];

/**
 * What one line of a program does. Positions in mm of the cut axis, feeds in E units. `expectedMs` is how long the
 * firmware's motion may keep its ok away: a move's own time, for `await` that of all moves since the last one,
 * for a setting 0. What the link and the agent take comes on top.
 */
export type ProgramStep = { line: string; expectedMs: number } & (
  | { kind: 'setting' }
  | { kind: 'home' }
  | { kind: 'declare'; cutAxisMm: number }
  | { kind: 'zero-feed' }
  | { kind: 'feed'; feedTo: number }
  | { kind: 'cut'; cutAxisMm: number }
  | { kind: 'standby'; cutAxisMm: number }
  | { kind: 'park'; cutAxisMm: number }
  | { kind: 'await' }
  | { kind: 'ask' }
  /**
   * `G92 <register><tag·10000 + n> E0`: the piece n counts, or, with n = 0, the run begins. Where the profile has no
   * register axis the line is `G92 E0` and `register` is `null`.
   */
  | { kind: 'register'; register: number | null; piece: number }
);

/**
 * A program taken apart. `pieces[n - 1]` holds the steps of piece n; without a register axis there is no tag. Equal
 * steps may be one object: never change them.
 */
export interface ReadProgram {
  tag: number | null;
  preamble: ProgramStep[];
  home: ProgramStep[];
  trim: ProgramStep[];
  register: ProgramStep[];
  pieces: ProgramStep[][];
  end: ProgramStep[];
}

/** One thing that is wrong with a program; `lineNumber` counts from 1. */
export interface ProgramProblem {
  lineNumber: number;
  message: string;
}

export type ProgramReading = { ok: true; program: ReadProgram } | { ok: false; problems: ProgramProblem[] };
