import { Firmware } from '../firmware/firmware';
import { Mechanics } from '../mechanics/mechanics';
import { seededRandom } from '../mechanics/random';
import type { RigSettings } from '../settings';
import type { TallySink } from '../tally';
import { Answers } from './answers';
import { LineNoise } from './line-noise';

/** Where the core's doings go. Text has one character a byte. */
export interface RigSinks {
  send: (text: string) => void;
  display: (text: string) => void;
  tally: TallySink;
}

/**
 * A whole rig without clock and without port: bytes, faults and moments go in, bytes and tally come out.
 * All times are mechanical ms since the rig was made.
 */
export class RigCore {
  readonly mechanics: Mechanics;
  readonly firmware: Firmware;
  readonly answers: Answers;
  readonly noise: { in: LineNoise; out: LineNoise };
  nowMs = 0;
  portOpen = false;

  constructor(
    readonly settings: RigSettings,
    private readonly sinks: RigSinks,
  ) {
    const { seed } = settings;
    this.noise = {
      in: new LineNoise(seededRandom(seed + 2_000_003)),
      out: new LineNoise(seededRandom(seed + 3_000_017)),
    };
    this.answers = new Answers((text) => this.put(text), settings.speed);
    this.mechanics = new Mechanics(settings.mechanics, seed, sinks.tally);
    this.firmware = new Firmware(settings, this.mechanics, {
      send: (line) => this.answers.send(line, this.nowMs),
      display: sinks.display,
      tally: sinks.tally,
    });
  }

  /** Switches the rig on; before that nothing of it lives. */
  switchOn(): void {
    this.firmware.reset('power');
  }

  /** @returns when the rig does something next by itself. */
  nextDueAt(): number | undefined {
    const firmwareAt = this.firmware.nextDueAt();
    const answerAt = this.answers.nextDueAt();
    if (firmwareAt === undefined) return answerAt;
    return answerAt === undefined ? firmwareAt : Math.min(firmwareAt, answerAt);
  }

  /** Lives up to `nowMs`, from one due moment to the next. */
  advanceTo(nowMs: number): void {
    for (let at = this.nextDueAt(); at !== undefined && at <= nowMs; at = this.nextDueAt()) {
      this.stepTo(Math.max(at, this.nowMs));
    }
    this.stepTo(Math.max(nowMs, this.nowMs));
  }

  /** Bytes from the sender, at the present moment. */
  receive(text: string): void {
    this.firmware.receive(this.noise.in.pass(text));
  }

  /** Somebody opened the port; on boards that do, that resets. */
  openPort(): void {
    if (this.portOpen) return;
    this.portOpen = true;
    this.sinks.tally({ kind: 'port', open: true }, this.nowMs);
    if (this.settings.resetOnOpen && this.firmware.state !== 'off') this.firmware.reset('port-opened');
  }

  /** The port was closed; the board lives on. */
  closePort(): void {
    if (!this.portOpen) return;
    this.portOpen = false;
    this.sinks.tally({ kind: 'port', open: false }, this.nowMs);
  }

  private stepTo(nowMs: number): void {
    this.nowMs = nowMs;
    this.mechanics.advanceTo(nowMs);
    this.answers.advanceTo(nowMs);
    this.firmware.advanceTo(nowMs);
  }

  private put(text: string): void {
    if (this.portOpen) this.sinks.send(this.noise.out.pass(text));
  }
}
