import { readReply, type Reply } from '@/agent/dialect/reply';
import { reduce, type RigEvent } from '@/agent/runner/reduce';
import { remember, type Entry } from '@/agent/runner/remember';
import { restoreRig } from '@/agent/runner/restore';
import type { RigState, Run } from '@/agent/runner/state';
import type { Effect } from '@/agent/runner/turn';
import { generateProgram } from '@/lib/program/generate';
import type { Profile } from '@/lib/program/profile';
import { readProgram } from '@/lib/program/read';
import type { ReadProgram } from '@/lib/program/steps';
import type { Command, CommandAnswer, MovingCommand } from '@/lib/protocol/commands';
import type { EventBody, EventKind } from '@/lib/protocol/events';
import type { RunProgram } from '@/lib/protocol/pairing';

export const RIG = '00000000-0000-4000-8000-000000000010';
export const RUN = '00000000-0000-4000-8000-000000000020';
export const PERSON = '00000000-0000-4000-8000-000000000030';
export const WIRE = '00000000-0000-4000-8000-000000000040';
const SUM = 'a'.repeat(64);
const BEGIN_MS = Date.parse('2026-12-01T08:00:00.000Z');

export const bareProfile: Profile = {
  cutAxis: {
    axis: 'Z',
    homing: 'endstop',
    homeMm: 10,
    standbyMm: 8,
    cutMm: 5.5,
    parkMm: 12,
    lowestMm: 5,
    highestMm: 20,
    speedMmS: 25,
    accelerationMmS2: 500,
    stepsPerMm: 100,
  },
  feed: {
    feedPerMm: 1,
    speedMmS: 60,
    accelerationMmS2: 1000,
    longestMoveMm: 150,
    shortestPieceMm: 10,
    longestPieceMm: 3000,
    trimMm: 12,
  },
  registerAxis: 'Y',
  steppersHoldS: 120,
  fitted: {
    guardSwitch: null,
    guardCutsMotorPower: false,
    hardwareStop: false,
    wireSwitch: false,
    display: false,
    beeper: false,
    heater: false,
    emergencyParser: true,
  },
  serial: { baudRate: 115200, resetsOnOpen: false },
};

export function programFor(
  profile: Profile,
  order: { pieces: number; lengthMm: number; firstPieces?: number },
) {
  const { pieces, lengthMm, firstPieces = 0 } = order;
  const text = generateProgram(profile, { tag: 17, pieces, lengthMm }).text;
  const reading = readProgram(text, profile);
  if (!reading.ok) throw new Error(JSON.stringify(reading.problems));
  const given: RunProgram = {
    runId: RUN,
    rigId: RIG,
    fence: 3,
    tag: 17,
    pieces,
    lengthMm,
    firstPieces,
    wireId: WIRE,
    profileVersion: 1,
    profile,
    programSha256: SUM,
    program: text,
  };
  return { given, program: reading.program };
}

/** The reducer at a firmware that is modelled by three coordinates: every effect is done at once. */
export class DrivenRig {
  state: RigState;
  nowMs = BEGIN_MS;
  readonly sent: string[] = [];
  readonly interrupts: string[] = [];
  readonly effects: Effect[] = [];
  readonly entries: Entry[] = [];
  readonly answers = new Map<string, CommandAnswer>();
  position = { X: 0, Y: 0, Z: 10, E: 0 };
  /** Steps that the cut axis is short of where it is said to be. */
  stepsShort = 0;
  /** Replies given before the ok of the next line that fits. */
  saying: { to: RegExp; lines: string[] } | null = null;
  /** Takes what would go out, where a real conversation answers instead of the model here. */
  onSend: (line: Extract<Effect, { do: 'send' | 'interrupt' }>) => void = () => undefined;
  #ids = 0;

  constructor(
    readonly profile: Profile,
    readonly held: { given: RunProgram; program: ReadProgram },
    entries: Entry[] = [],
  ) {
    this.entries = [...entries];
    // A later life gives no id a second time.
    this.#ids = entries.length * 100;
    const memory = remember(entries).get(RIG) ?? null;
    this.state = restoreRig({
      rigId: RIG,
      profile,
      fence: 0,
      challenge: 'challenge-of-the-beginning',
      nowMs: this.nowMs,
      memory,
      held: memory?.run ? held : null,
    });
    this.happens({ type: 'restored', journalDamaged: false });
  }

  get run(): Run {
    if (!this.state.run) throw new Error('no run');
    return this.state.run;
  }

  happens(event: WithoutTime<RigEvent>): void {
    const { state, effects } = reduce(this.state, { ...event, nowMs: this.nowMs });
    this.state = state;
    for (const effect of effects) this.#perform(effect);
  }

  #perform(effect: Effect): void {
    this.effects.push(effect);
    if (effect.do === 'send') this.sent.push(effect.command);
    if (effect.do === 'interrupt') this.interrupts.push(effect.command);
    if (effect.do === 'send' || effect.do === 'interrupt') this.onSend(effect);
    if (effect.do === 'answer') this.answers.set(effect.commandId, effect.answer);
    if (effect.do === 'event') this.entries.push({ type: 'event', event: { body: effect.body } });
    if (effect.do === 'note') this.entries.push({ type: 'note', note: effect.note });
    if (effect.do === 'fetch') {
      const { commandId, runId } = effect;
      const fetched = { outcome: 'read', run: this.held.given, program: this.held.program } as const;
      this.happens({ type: 'fetched', commandId, runId, fetched });
    }
  }

  meet(bannerSeen = false): void {
    const firmware = {
      name: 'Marlin',
      machineType: 'rig',
      virtual: false,
      dialect: 'main family',
      capabilities: {},
    };
    this.happens({ type: 'met', firmware, bannerSeen });
  }

  /** What the firmware answers to a line, after doing it. */
  #replies(command: string): Reply[] {
    const words = new Map(
      [...command.matchAll(/\b([XYZE])(-?[\d.]+)/g)].map(([, axis, value]) => [axis, Number(value)]),
    );
    if (/^(G1|G92)\b/.test(command)) {
      for (const axis of ['X', 'Y', 'Z', 'E'] as const)
        this.position[axis] = words.get(axis) ?? this.position[axis];
    }
    const { X, Y, Z, E } = this.position;
    const at = (value: number) => value.toFixed(2);
    const told = `X:${at(X)} Y:${at(Y)} Z:${at(Z)} E:${at(E)} Count X:0 Y:0 Z:${Math.round(Z * 100) + this.stepsShort}`;
    const said = this.saying?.to.test(command) ? this.saying.lines : [];
    if (said.length > 0) this.saying = null;
    const lines = [...said, ...(/^(M114|G92|G28)/.test(command) ? [told] : []), 'ok'];
    return lines.map(readReply);
  }

  /** Answers the line in flight. */
  answer(sure = true): void {
    const command = this.sent.at(-1);
    if (this.state.outstanding === null || command === undefined) throw new Error('nothing is in flight');
    const replies = this.#replies(command);
    for (const reply of replies)
      if (reply.kind === 'refusal' || reply.kind === 'action') this.happens({ type: 'heard', reply });
    this.nowMs += 10;
    this.happens({ type: 'answered', sure, replies });
  }

  /** Answers lines until one that fits is in flight, or none is. */
  driveTo(wanted: RegExp | null): void {
    for (let lines = 0; lines < 5_000; lines += 1) {
      if (this.state.outstanding === null) {
        if (wanted) throw new Error(`it stands still before ${wanted}`);
        return;
      }
      if (wanted?.test(this.sent.at(-1) ?? '')) return;
      this.answer();
    }
    throw new Error('it goes on for ever');
  }

  envelope() {
    this.#ids += 1;
    const id = `00000000-0000-4000-8000-1${String(this.#ids).padStart(11, '0')}`;
    const issuedAt = new Date(this.nowMs).toISOString();
    return { id, rigId: RIG, personId: PERSON, fence: 3, issuedAt };
  }

  moving(kind: 'start-run' | 'go-on', firstPiecesAgain = false): MovingCommand {
    const common = {
      ...this.envelope(),
      challenge: this.state.challenge,
      presenceCode: null,
      runId: RUN,
      conditions: {
        notesVersion: 1,
        acknowledgedBy: PERSON,
        acknowledgedAt: new Date(this.nowMs).toISOString(),
        trayCleared: true,
        workHold: false,
        loadedWireId: WIRE,
        spoolLeftMm: 1_000_000,
      },
    };
    return kind === 'start-run'
      ? { kind, ...common, programSha256: SUM }
      : { kind, ...common, firstPiecesAgain };
  }

  command(command: Command): CommandAnswer | undefined {
    this.happens({
      type: 'command',
      command,
      skewMs: 0,
      challenge: `challenge-after-${command.id}`,
      code: '4711',
    });
    return this.answers.get(command.id);
  }

  /** Program taken, run started, first line in flight. */
  start(): void {
    this.meet();
    this.command({ kind: 'take-program', ...this.envelope(), runId: RUN });
    const answer = this.command(this.moving('start-run'));
    if (answer?.outcome !== 'done') throw new Error(JSON.stringify(answer));
  }

  said<Kind extends EventKind>(kind: Kind): Extract<EventBody, { kind: Kind }>[] {
    return this.entries.flatMap((entry) =>
      entry.type === 'event' && entry.event.body.kind === kind
        ? [entry.event.body as Extract<EventBody, { kind: Kind }>]
        : [],
    );
  }

  /** A new agent that knows what this one's journal says, and meets the same rig. */
  reborn(): DrivenRig {
    const rig = new DrivenRig(this.profile, this.held, this.entries);
    rig.nowMs = this.nowMs;
    rig.position = { ...this.position };
    return rig;
  }
}

export type WithoutTime<Event> = Event extends unknown ? Omit<Event, 'nowMs'> : never;

export function drivenRig(
  order: { pieces: number; lengthMm: number; firstPieces?: number },
  profile = bareProfile,
) {
  return new DrivenRig(profile, programFor(profile, order));
}
