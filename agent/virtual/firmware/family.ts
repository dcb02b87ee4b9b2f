import type { FirmwareSettings } from '../settings';
import { MainNumbers, RepetierNumbers, type LineNumbers } from './numbers';

/** What a family of firmware does otherwise than the others; the commands themselves are shared. */
export interface Family {
  numbers(): LineNumbers;
  /** An ok comes when a line was received, with its number, before it is carried out. */
  acksOnReceipt: boolean;
  /** What `M114` tells: with the step counters, and after every naming of places too. */
  tellsSteps: boolean;
  /** A longer feed of one move is not carried out, whatever the settings say, mm. */
  longestFeedMm: number;
  busy: string;
  stopped: string;
  killed: string;
  /** Idle for so long, wall ms, and it says `wait`; null: never. */
  waitsEveryMs: number | null;
  /** Holds moves within the soft end stops until it is told otherwise. */
  softStops: boolean;
  /** `M302 S0` allows cold feed, or forbids it. */
  zeroAllowsColdFeed: boolean;
  /** Commands of the table that this family is built without. */
  lacks: ReadonlySet<string>;
}

const marlin: Family = {
  numbers: () => new MainNumbers(),
  acksOnReceipt: false,
  tellsSteps: true,
  longestFeedMm: Number.POSITIVE_INFINITY,
  busy: 'echo:busy: processing',
  stopped: 'Error:Printer stopped due to errors. Fix the error and use M999 to restart.',
  killed: 'Error:Printer halted. kill() called!',
  waitsEveryMs: null,
  softStops: true,
  zeroAllowsColdFeed: true,
  lacks: new Set(),
};

const repetier: Family = {
  numbers: () => new RepetierNumbers(),
  acksOnReceipt: true,
  tellsSteps: false,
  longestFeedMm: 160,
  busy: 'busy:processing',
  stopped: 'fatal:Printer stopped due to an error. Fix it and restart with M999.',
  killed: 'fatal:Emergency stop',
  waitsEveryMs: 1_000,
  softStops: false,
  zeroAllowsColdFeed: false,
  lacks: new Set(['M75', 'M76', 'M77', 'M211', 'M410', 'M412', 'M503']),
};

/** The family that the settings name. */
export function familyOf({ family }: FirmwareSettings): Family {
  return family === 'repetier' ? repetier : marlin;
}
