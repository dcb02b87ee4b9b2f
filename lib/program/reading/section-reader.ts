import type { Profile } from '../profile';
import type { ProgramProblem, ProgramStep } from '../steps';
import { homingMs, travelMs } from './deadline';
import { feedProblem, type Place, positionProblem, pressSpeedProblem } from './limits';
import { type Command, type Meaning, meaningOf } from './meaning';
import type { Section } from './sections';

/** Thrown to leave a part at its first line that is not what must stand there; what follows would only echo it. */
export class PartRefused extends Error {}

const SPOKEN: Record<Meaning['is'], string> = {
  setting: 'a setting',
  home: 'homing',
  declare: 'the home position',
  'zero-feed': 'the zeroing of the feed',
  register: 'the register',
  feed: 'a feed',
  press: 'a move of the cut axis',
  await: 'M400',
  ask: 'M114',
};

function isMeaning<Is extends Meaning['is']>(
  meaning: Meaning,
  is: Is,
): meaning is Extract<Meaning, { is: Is }> {
  return meaning.is === is;
}

/** What one part hands to the next: where the cut axis is sent, and the motion that no `M400` has awaited. */
export interface Carried {
  cutAxisMm: number;
  pendingMs: number;
  /** One object for equal steps: thousands of pieces differ in their register lines alone. */
  known: Map<string, ProgramStep>;
}

/** Walks along the commands of one part and takes each only as what must stand there. */
export class SectionReader {
  readonly steps: ProgramStep[] = [];
  private at = 0;
  private fedTo = 0;

  constructor(
    private readonly section: Section,
    private readonly profile: Profile,
    private readonly problems: ProgramProblem[],
    private readonly carried: Carried,
  ) {}

  complain(message: string | null, lineNumber = this.section.lineNumber): void {
    if (message !== null) this.problems.push({ lineNumber, message });
  }

  private push(step: ProgramStep): void {
    const key = `${step.kind} ${step.expectedMs} ${step.line}`;
    const equal = this.carried.known.get(key) ?? step;
    this.carried.known.set(key, equal);
    this.steps.push(equal);
  }

  private next(): { command: Command; meaning: Meaning } | null {
    const command = this.section.commands[this.at];
    if (!command) return null;
    const meaning = meaningOf(command, this.profile);
    if (typeof meaning !== 'string') return { command, meaning };
    this.complain(meaning, command.lineNumber);
    throw new PartRefused();
  }

  private take<Is extends Meaning['is']>(
    is: Is,
  ): { command: Command; meaning: Extract<Meaning, { is: Is }> } {
    const found = this.next();
    if (found && isMeaning(found.meaning, is)) {
      this.at += 1;
      return { command: found.command, meaning: found.meaning };
    }
    const stands = found ? `${SPOKEN[found.meaning.is]} stands here` : 'the part ends';
    const last = this.section.commands.at(-1)?.lineNumber;
    this.complain(`Here must be ${SPOKEN[is]}, but ${stands}.`, found?.command.lineNumber ?? last);
    throw new PartRefused();
  }

  /** The settings that must all stand here, in any order and once each. */
  settings(wanted: readonly string[]): void {
    const missing = new Set(wanted);
    while (missing.size > 0) {
      const { command } = this.take('setting');
      if (!missing.delete(command.text)) {
        this.complain('This setting is not wanted here, or stands twice.', command.lineNumber);
        throw new PartRefused();
      }
      this.push({ line: command.text, expectedMs: 0, kind: 'setting' });
    }
  }

  home(): void {
    const { command } = this.take('home');
    this.push({ line: command.text, expectedMs: homingMs(this.profile), kind: 'home' });
  }

  declare(): void {
    const { command, meaning } = this.take('declare');
    const { cutAxisMm } = meaning;
    this.complain(positionProblem(this.profile, 'home', cutAxisMm), command.lineNumber);
    this.carried.cutAxisMm = cutAxisMm;
    this.push({ line: command.text, expectedMs: 0, kind: 'declare', cutAxisMm });
  }

  zeroFeed(): void {
    const { command } = this.take('zero-feed');
    this.fedTo = 0;
    this.push({ line: command.text, expectedMs: 0, kind: 'zero-feed' });
  }

  /** One feed or more, each on from the last; gives the E coordinate of the last. */
  feeds(): number {
    const { feed } = this.profile;
    do {
      const { command, meaning } = this.take('feed');
      this.complain(feedProblem(this.profile, this.fedTo, meaning), command.lineNumber);
      const distanceMm = Math.max(0, meaning.feedTo - this.fedTo) / feed.feedPerMm;
      const expectedMs = travelMs(distanceMm, feed.speedMmS, feed.accelerationMmS2);
      this.carried.pendingMs += expectedMs;
      this.fedTo = meaning.feedTo;
      this.push({ line: command.text, expectedMs, kind: 'feed', feedTo: meaning.feedTo });
    } while (this.next()?.meaning.is === 'feed');
    return this.fedTo;
  }

  /** The one move of the cut axis that may stand here. */
  press(kind: Exclude<Place, 'home'>): void {
    const { command, meaning } = this.take('press');
    const { cutAxis } = this.profile;
    const { cutAxisMm } = meaning;
    this.complain(positionProblem(this.profile, kind, cutAxisMm), command.lineNumber);
    this.complain(pressSpeedProblem(this.profile, meaning.mmPerMin), command.lineNumber);
    const distanceMm = Math.abs(cutAxisMm - this.carried.cutAxisMm);
    const expectedMs = travelMs(distanceMm, cutAxis.speedMmS, cutAxis.accelerationMmS2);
    this.carried.pendingMs += expectedMs;
    this.carried.cutAxisMm = cutAxisMm;
    this.push({ line: command.text, expectedMs, kind, cutAxisMm });
  }

  /** `M400`: its ok stays away until all that moves has come to rest. */
  rest(): void {
    const { command } = this.take('await');
    this.push({ line: command.text, expectedMs: this.carried.pendingMs, kind: 'await' });
    this.carried.pendingMs = 0;
  }

  ask(): void {
    const { command } = this.take('ask');
    this.push({ line: command.text, expectedMs: 0, kind: 'ask' });
  }

  /** The counting line of a piece; gives its register, `null` where the profile has no axis for one. */
  register(piece: number): { register: number | null; lineNumber: number } {
    if (this.profile.registerAxis === null) {
      const { command } = this.take('zero-feed');
      this.steps.push({ line: command.text, expectedMs: 0, kind: 'register', register: null, piece });
      return { register: null, lineNumber: command.lineNumber };
    }
    const { command, meaning } = this.take('register');
    const { register } = meaning;
    this.steps.push({ line: command.text, expectedMs: 0, kind: 'register', register, piece });
    return { register, lineNumber: command.lineNumber };
  }

  /** Nothing may follow in this part. */
  close(): void {
    const found = this.next();
    if (found) this.complain('Nothing may stand here: the part is complete.', found.command.lineNumber);
  }
}
