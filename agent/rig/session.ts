import type { Clock } from '@/agent/clock';
import type { Reply } from '@/agent/dialect/reply';
import { createConversation, type Conversation } from '@/agent/link/conversation';
import type { LinkFailure } from '@/agent/link/exchange';
import { createEar, greet, type Ear, type Greeting } from '@/agent/link/greet';
import type { OpenPort, Port } from '@/agent/link/port';
import type { FindPort } from '@/agent/link/ports';
import { resetNotice } from './reset-notice';
import type { Firmware } from '@/lib/protocol/report';

const RETRY_FIRST_MS = 250;
const RETRY_CEILING_MS = 5_000;
/** A port that speaks another language is asked again this rarely. */
const STRANGER_MS = 15_000;

export interface SessionEvents {
  opening(): void;
  /** `notice`: the opening went otherwise than the profile says. */
  met(firmware: Firmware, bannerSeen: boolean, notice: string | null): void;
  stranger(reason: string): void;
  /** The port does not open, or nobody answers. */
  unreachable(reason: string): void;
  lost(failure: LinkFailure, reason: string): void;
  heard(reply: Reply): void;
}

export interface SessionParts {
  /** Asked at each opening: the rig may have come back under another name. */
  findPort: FindPort;
  /** Asked at each opening: a new profile may have come. */
  serial: () => { baudRate: number; resetsOnOpen: boolean; unnumbered?: boolean };
  openPort: OpenPort;
  clock: Clock;
  /** Why this agent does not serve a firmware that it could speak to; null: it does. */
  objection: (firmware: Firmware) => string | null;
  /** In [0, 1). */
  random: () => number;
  events: SessionEvents;
}

/** Keeps one port open as well as it can, for as long as the agent lives. */
export interface Session {
  start(): void;
  /** The conversation with a firmware that was met; null between. */
  readonly conversation: Conversation | null;
  /** Something in flight told that the link is of no more use as it is. */
  fail(conversation: Conversation, failure: LinkFailure): void;
  close(): Promise<void>;
}

const REASONS: Record<LinkFailure, string> = {
  closed: 'The port was closed: cable or power.',
  silent: 'The rig does not answer any more.',
  'out-of-step': 'The rig and the agent do not agree on line numbers.',
  reset: 'The firmware began anew.',
  halted: 'The firmware has halted. Reset the rig.',
};

export function createSession(parts: SessionParts): Session {
  return new PortSession(parts);
}

/** One promise that is kept by whoever comes first. */
function createEnding() {
  let end: (failure: LinkFailure) => void = () => undefined;
  const ended = new Promise<LinkFailure>((resolve) => {
    end = resolve;
  });
  return { end, ended };
}

class PortSession implements Session {
  conversation: Conversation | null = null;
  #closed = false;
  #port: Port | null = null;
  #ending = createEnding();
  #ear: Ear;
  #wake: () => void = () => undefined;
  #running: Promise<void> = Promise.resolve();

  constructor(private readonly parts: SessionParts) {
    this.#ear = createEar(parts.clock);
  }

  start(): void {
    this.#running = this.#run();
  }

  fail(conversation: Conversation, failure: LinkFailure): void {
    if (conversation === this.conversation) this.#ending.end(failure);
  }

  async close(): Promise<void> {
    this.#closed = true;
    this.#wake();
    this.#ending.end('closed');
    await this.#port?.close();
    await this.#running;
  }

  async #run(): Promise<void> {
    let tries = 0;
    while (!this.#closed) {
      this.parts.events.opening();
      const port = await this.#open();
      tries += 1;
      const outcome = port ? await this.#live(port) : 'unreachable';
      if (this.#closed) return;
      if (outcome === 'met') tries = 0;
      const fullMs = Math.min(RETRY_CEILING_MS, RETRY_FIRST_MS * 2 ** Math.min(tries, 8));
      await this.#rest(outcome === 'stranger' ? STRANGER_MS : fullMs * (0.5 + 0.5 * this.parts.random()));
    }
  }

  #rest(ms: number): Promise<void> {
    return new Promise((resolve) => {
      const callOff = this.parts.clock.after(ms, resolve);
      this.#wake = () => {
        callOff();
        resolve();
      };
    });
  }

  async #open(): Promise<Port | null> {
    const { findPort, openPort, serial, events } = this.parts;
    try {
      const port = await findPort();
      if (port.found) return await openPort({ path: port.path, baudRate: serial().baudRate });
      if (port.refused) events.stranger(port.reason);
      else events.unreachable(port.reason);
    } catch (error) {
      events.unreachable(error instanceof Error ? error.message : 'The port does not open.');
    }
    return null;
  }

  /** From the opened port to its loss. */
  async #live(port: Port): Promise<'met' | 'stranger' | 'unreachable'> {
    const { clock, events } = this.parts;
    this.#port = port;
    this.#ear = createEar(clock);
    this.#ending = createEnding();
    let talking = false;
    const onReply = (reply: Reply) => {
      this.#ear.hear(reply);
      if (talking) this.#hear(reply);
    };
    const numbered = this.parts.serial().unnumbered !== true;
    const conversation = createConversation(port, clock, onReply, { numbered });
    port.onClose(() => this.#ending.end('closed'));
    let outcome: 'met' | 'stranger' | 'unreachable' = 'unreachable';
    let resets = this.parts.serial().resetsOnOpen;
    let opened = true;
    while (!this.#closed) {
      const greeting = this.#admit(await greet(conversation, this.#ear, clock, resets));
      if (greeting.outcome === 'failed' && greeting.failure === 'reset') continue;
      if (greeting.outcome !== 'met') {
        outcome = greeting.outcome === 'stranger' ? 'stranger' : 'unreachable';
        if (greeting.outcome === 'stranger') events.stranger(greeting.reason);
        else events.unreachable(REASONS[greeting.failure]);
        break;
      }
      outcome = 'met';
      talking = true;
      this.#ear = createEar(clock);
      this.#ending = createEnding();
      if (!port.isOpen) this.#ending.end('closed');
      this.conversation = conversation;
      const { firmware, bannerSeen } = greeting;
      events.met(firmware, bannerSeen, opened ? resetNotice(resets, bannerSeen) : null);
      const failure = await this.#untilLost(conversation);
      talking = false;
      if (failure !== 'reset') break;
      resets = opened = false;
    }
    this.conversation = null;
    await port.close();
    this.#port = null;
    return outcome;
  }

  #admit(greeting: Greeting): Greeting {
    const reason = greeting.outcome === 'met' ? this.parts.objection(greeting.firmware) : null;
    return reason === null ? greeting : { outcome: 'stranger', reason };
  }

  /** Waits through a halt, which only a reset or an unplugging ends. */
  async #untilLost(conversation: Conversation): Promise<LinkFailure> {
    for (;;) {
      const failure = await this.#ending.ended;
      this.#ending = createEnding();
      // Before anybody hears of it: nothing more is sent as if nothing had happened.
      this.conversation = null;
      conversation.abandon(failure);
      this.parts.events.lost(failure, REASONS[failure]);
      if (failure !== 'halted' || this.#closed) return failure;
    }
  }

  #hear(reply: Reply): void {
    if (reply.kind === 'start') this.#ending.end('reset');
    else if (reply.kind === 'halted') this.#ending.end('halted');
    this.parts.events.heard(reply);
  }
}
