import type { Profile } from '../profile';
import { pieceProblem, trimProblem } from './limits';
import type { SectionReader } from './section-reader';

/** The register of tag t and piece n is t · 10000 + n. */
const PIECES_PER_TAG = 10_000;
const HIGHEST_TAG = 99;

/** Cold feed allowed, steppers held, absolute axes and feed, and what the profile's own parts need. */
export function readPreamble(reader: SectionReader, { cutAxis, fitted }: Profile): void {
  reader.settings([
    'M302 P1',
    'M84 S0',
    // A cut below zero is clipped after homing by end stop unless this is off.
    ...(cutAxis.homing === 'endstop' ? ['M211 S0'] : []),
    ...(fitted.wireSwitch ? ['M412 H1', 'M75'] : []),
    'G90',
    'M82',
  ]);
  reader.zeroFeed();
}

export function readHome(reader: SectionReader, { cutAxis }: Profile): void {
  if (cutAxis.homing === 'endstop') reader.home();
  reader.declare();
  reader.press('standby');
  reader.rest();
  reader.ask();
}

export function readTrim(reader: SectionReader, profile: Profile): void {
  reader.zeroFeed();
  reader.complain(trimProblem(profile, reader.feeds()));
  reader.press('cut');
  reader.rest();
  reader.ask();
  reader.zeroFeed();
  reader.press('standby');
  reader.rest();
}

/** Gives the run's tag, `null` where there is no register or it is none. */
export function readRegister(reader: SectionReader): number | null {
  const { register, lineNumber } = reader.register(0);
  if (register === null) return null;
  const tag = register / PIECES_PER_TAG;
  if (Number.isInteger(tag) && tag >= 1 && tag <= HIGHEST_TAG) return tag;
  reader.complain(`The register begins at a tag of 1 to ${HIGHEST_TAG} and no piece.`, lineNumber);
  return null;
}

/** Gives the feed coordinate at which the piece is cut, in E units. */
export function readPiece(
  reader: SectionReader,
  profile: Profile,
  piece: number,
  tag: number | null,
): number {
  const fedUnits = reader.feeds();
  reader.complain(pieceProblem(profile, fedUnits));
  reader.press('cut');
  reader.rest();
  reader.ask();
  const { register, lineNumber } = reader.register(piece);
  if (register !== null && tag !== null && register !== tag * PIECES_PER_TAG + piece) {
    reader.complain(`The register of piece ${piece} is ${tag * PIECES_PER_TAG + piece}.`, lineNumber);
  }
  reader.press('standby');
  return fedUnits;
}

export function readEnd(reader: SectionReader, { fitted }: Profile): void {
  if (fitted.wireSwitch) reader.settings(['M77']);
  reader.rest();
  reader.press('park');
  reader.rest();
  reader.ask();
}
