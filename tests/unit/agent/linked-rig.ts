import type { Reply, ReplyKind } from '@/agent/dialect/reply';
import { createConversation, type Conversation } from '@/agent/link/conversation';
import type { LinkFailure } from '@/agent/link/exchange';
import { createEar, greet, type Ear, type Greeting } from '@/agent/link/greet';
import type { Effect } from '@/agent/runner/turn';
import { control, type CoreRequest } from '@/agent/virtual/core/controls';
import { RigCore } from '@/agent/virtual/core/rig-core';
import { rigSettingsSchema, type RigInput } from '@/agent/virtual/settings';
import type { TallyEvent } from '@/agent/virtual/tally';
import type { Profile } from '@/lib/program/profile';
import { bareProfile, DrivenRig, programFor, RUN } from './driven-rig';
import { HandClock, settle } from './hand-clock';
import { TestPort } from './test-port';

/** Bytes take so long from one end to the other, ms. */
const WAY_MS = 1;
const TICK_MS = 250;
const HEARD: readonly ReplyKind[] = ['refusal', 'action', 'other', 'error', 'halted', 'switch-hit'];

export interface LinkedOptions {
  pieces?: number;
  lengthMm?: number;
  profile?: Profile;
  rig?: RigInput;
}

/** The agent's reducer and link at a virtual rig, on one clock that the test moves: no process, no port, no waiting. */
export class LinkedRig {
  readonly clock = new HandClock();
  readonly core: RigCore;
  readonly tally: TallyEvent[] = [];
  readonly driven: DrivenRig;
  readonly port: TestPort;
  /** What was answered to doubted pieces. */
  readonly settled: ('count' | 'discard')[] = [];
  /** Every failure of the link so far. */
  readonly failures: LinkFailure[] = [];
  readonly lengthMm: number;
  conversation: Conversation;
  #ear: Ear;
  #met = false;
  #out = '';
  #part = '';
  /** Called for each line that was written, before the rig gets it. */
  onLine: (line: string) => void = () => undefined;
  /** What a bad cable makes of a text on its way to the rig. */
  damage: (text: string) => string = (text) => text;

  constructor({ pieces = 3, lengthMm = 40, profile = bareProfile, rig = {} }: LinkedOptions = {}) {
    this.lengthMm = lengthMm;
    this.core = new RigCore(rigSettingsSchema.parse({ resetOnOpen: false, ...rig }), {
      send: (text) => this.#send(text),
      display: () => undefined,
      tally: (event) => this.tally.push(event),
    });
    this.core.switchOn();
    this.core.openPort();
    // The board has booted; from here on both clocks are one.
    this.clock.moveTo(2_000);
    this.core.advanceTo(2_000);
    this.#out = '';
    this.driven = new DrivenRig(profile, programFor(profile, { pieces, lengthMm }));
    this.driven.onSend = (effect) => this.#effect(effect);
    this.port = new TestPort((text) => this.#written(text));
    this.#ear = createEar(this.clock);
    const numbered = profile.serial.unnumbered !== true;
    const onReply = (reply: Reply) => this.#heard(reply);
    this.conversation = createConversation(this.port, this.clock, onReply, { numbered });
    this.#tick();
  }

  /** Greets the rig as the session does. */
  async meet(): Promise<Greeting> {
    const greeting = await this.during(greet(this.conversation, this.#ear, this.clock, false));
    if (greeting.outcome === 'met') {
      this.#met = true;
      this.#ear = createEar(this.clock);
      this.driven.happens({ type: 'met', firmware: greeting.firmware, bannerSeen: greeting.bannerSeen });
    }
    return greeting;
  }

  /** Program taken and run started. */
  async start(): Promise<void> {
    const greeting = await this.meet();
    if (greeting.outcome !== 'met') throw new Error(JSON.stringify(greeting));
    await this.until(() => this.driven.state.outstanding === null, 10_000);
    this.driven.command({ kind: 'take-program', ...this.driven.envelope(), runId: RUN });
    this.goOn('start-run');
  }

  goOn(kind: 'start-run' | 'go-on' = 'go-on'): void {
    const answer = this.driven.command(this.driven.moving(kind));
    if (answer?.outcome !== 'done') throw new Error(JSON.stringify(answer));
  }

  control(request: CoreRequest): void {
    this.#catchUp();
    control(this.core, request);
  }

  /** Lets time pass until `happened`, at most `limitMs`. */
  async until(happened: () => boolean, limitMs = 600_000): Promise<void> {
    const endMs = this.clock.nowMs() + limitMs;
    for (;;) {
      await settle();
      if (happened()) return;
      const next = Math.min(this.clock.nextAtMs() ?? endMs, this.core.nextDueAt() ?? endMs);
      if (next >= endMs) throw new Error(`it did not happen: ${this.summary()}`);
      await this.#to(Math.max(next, this.clock.nowMs()));
    }
  }

  /** The run stands: ended or held. */
  stands(limitMs?: number): Promise<void> {
    return this.until(() => ['held', 'ended'].includes(this.driven.run.mode), limitMs);
  }

  /** Goes on with a held run as a person does who looks into the tray, until it has ended. @returns holds on the way. */
  async finish(holdsMax = 12): Promise<string[]> {
    const { driven } = this;
    const holds: string[] = [];
    for (;;) {
      await this.stands();
      if (driven.run.mode === 'ended') return holds;
      holds.push(driven.run.hold ?? '');
      if (holds.length > holdsMax) throw new Error(`held too often: ${holds.join(', ')}`);
      while (!this.#met) await this.meet();
      await this.until(() => driven.state.outstanding === null || !this.#met);
      if (!this.#met) continue;
      if (driven.run.doubt !== null) {
        const answer = this.goodPieces > this.counted.length ? 'count' : 'discard';
        this.settled.push(answer);
        driven.command({ kind: 'settle-piece', ...driven.envelope(), runId: RUN, answer });
      }
      if (driven.run.mode === 'held') this.goOn();
    }
  }

  async pass(ms: number): Promise<void> {
    const endMs = this.clock.nowMs() + ms;
    await this.until(() => this.clock.nowMs() >= endMs, ms + TICK_MS * 2);
  }

  async during<Result>(promise: Promise<Result>): Promise<Result> {
    let done = false;
    const settled = promise.finally(() => (done = true));
    await this.until(() => done);
    return settled;
  }

  /** Pieces that the jaws really severed at the ordered length. */
  get goodPieces(): number {
    return this.closings.filter(({ severed, wireMm }) => severed && Math.abs(wireMm - this.lengthMm) <= 0.05)
      .length;
  }

  get closings() {
    return this.tally.flatMap((event) => (event.kind === 'closing' ? [event] : []));
  }

  get counted(): number[] {
    return this.driven.said('piece-cut').map(({ piece }) => piece);
  }

  summary(): string {
    const { mode, hold, cut } = this.driven.run;
    return `${mode} ${hold ?? ''} ${cut} ${this.failures.join(' ')} ${this.driven.sent.slice(-3).join(' | ')}`;
  }

  async #to(atMs: number): Promise<void> {
    this.clock.moveTo(atMs);
    this.driven.nowMs = Date.parse('2026-12-01T08:00:00.000Z') + atMs;
    this.#catchUp();
    await settle();
    await this.clock.pass(0);
  }

  #catchUp(): void {
    this.core.advanceTo(this.clock.nowMs());
    this.#deliver();
  }

  #send(text: string): void {
    this.#out += text;
  }

  #deliver(): void {
    const text = this.#out;
    this.#out = '';
    if (text !== '') this.clock.after(WAY_MS, () => this.port.say(text));
  }

  #written(text: string): null {
    this.#part += text;
    const lines = this.#part.split('\n');
    this.#part = lines.pop() ?? '';
    for (const line of lines) this.onLine(line);
    this.clock.after(WAY_MS, () => {
      this.#catchUp();
      this.core.receive(this.damage(text));
      this.#deliver();
    });
    return null;
  }

  #heard(reply: Reply): void {
    this.#ear.hear(reply);
    if (!this.#met) return;
    if (HEARD.includes(reply.kind)) this.driven.happens({ type: 'heard', reply });
    if (reply.kind === 'start') this.#lost('reset');
    if (reply.kind === 'halted') this.#lost('halted');
  }

  #lost(failure: LinkFailure): void {
    if (!this.#met) return;
    this.#met = false;
    this.failures.push(failure);
    this.conversation.abandon(failure);
    this.driven.happens({ type: 'lost', failure, reason: failure });
  }

  #effect(effect: Extract<Effect, { do: 'send' | 'interrupt' }>): void {
    if (effect.do === 'interrupt') return this.conversation.interrupt(effect.command);
    const { command, expectedMs, needs } = effect;
    void this.conversation.ask(command, { expectedMs, needs }).then((answer) => {
      if (answer.outcome === 'failed') this.#lost(answer.failure);
      else if (this.#met) {
        this.driven.happens({ type: 'answered', sure: answer.outcome === 'ok', replies: answer.replies });
      }
    });
  }

  #tick(): void {
    this.clock.after(TICK_MS, () => {
      this.driven.happens({ type: 'tick' });
      this.#tick();
    });
  }
}
