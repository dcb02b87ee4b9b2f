import { RigCore } from '@/agent/virtual/core/rig-core';
import { rigSettingsSchema, type RigInput } from '@/agent/virtual/settings';
import type { TallyEvent } from '@/agent/virtual/tally';

type Tallied = TallyEvent & { atMs: number };
type OfKind<Kind extends TallyEvent['kind']> = Extract<TallyEvent, { kind: Kind }> & { atMs: number };

/** A rig on the test's own clock: nothing passes but what the test lets pass. */
export class RigAtHand {
  readonly core: RigCore;
  readonly tally: Tallied[] = [];
  readonly sent: string[] = [];
  readonly displayed: string[] = [];
  private partial = '';

  constructor(input: RigInput = {}) {
    this.core = new RigCore(rigSettingsSchema.parse({ resetOnOpen: false, ...input }), {
      send: (text) => this.take(text),
      display: (text) => this.displayed.push(text),
      tally: (event, atMs) => this.tally.push({ ...event, atMs }),
    });
    this.core.switchOn();
    this.core.openPort();
    this.pass(2000);
    this.sent.length = 0;
  }

  /** Lets mechanical time pass. */
  pass(ms: number): void {
    this.core.advanceTo(this.core.nowMs + ms);
  }

  /** Puts bytes on the line at this moment. @returns the lines answered at once. */
  put(text: string): string[] {
    const from = this.sent.length;
    this.core.receive(text);
    return this.sent.slice(from);
  }

  /** Sends one line and lets time pass until it is acknowledged. @returns all that was answered. */
  run(line: string): string[] {
    const from = this.sent.length;
    this.core.receive(`${line}\n`);
    const acknowledged = () => this.sent.slice(from).some((answer) => /^ok\b/.test(answer));
    for (let at = this.core.nextDueAt(); !acknowledged() && at !== undefined; at = this.core.nextDueAt()) {
      this.core.advanceTo(at);
    }
    return this.sent.slice(from);
  }

  runAll(...lines: string[]): void {
    for (const line of lines) this.run(line);
  }

  tallied<Kind extends TallyEvent['kind']>(kind: Kind): OfKind<Kind>[] {
    return this.tally.filter((event): event is OfKind<Kind> => event.kind === kind);
  }

  private take(text: string): void {
    const lines = (this.partial + text).split('\n');
    this.partial = lines.pop() ?? '';
    this.sent.push(...lines);
  }
}

/** Homed, feeds allowed cold, cuts below zero not clipped, at standby: as a run begins. */
export function preparedRig(input: RigInput = {}): RigAtHand {
  const rig = new RigAtHand(input);
  rig.runAll('M302 P1', 'M211 S0', 'M84 S0', 'G90', 'M82', 'G28 Z', 'G1 Z-1 F1200', 'M400');
  return rig;
}
