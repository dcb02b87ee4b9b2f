import type { Clock } from '@/agent/clock';
import { greetingDialect } from '@/agent/dialect/choose';
import type { Dialect } from '@/agent/dialect/dialect';
import type { Reply, ReplyKind } from '@/agent/dialect/reply';
import { beginExchange, stepExchange, type Exchange, type ExchangeStep, type LinkFailure } from './exchange';
import { PortClosed, type Port } from './port';
import { createSplitter } from './splitter';

/** What came of one line: its replies in order, or why there are none. */
export type Answer =
  { outcome: 'ok' | 'taken'; replies: readonly Reply[] } | { outcome: 'failed'; failure: LinkFailure };

export interface Asking {
  /** How long the firmware's motion may keep the ok away, ms. */
  expectedMs?: number;
  needs?: ReplyKind | null;
  /** The line number; the next one when not given. */
  line?: number;
}

/** One line in flight over an open port; every wait in it has an end. */
export interface Conversation {
  /** Never rejects. A second line while one is in flight is a fault of the caller and throws. */
  ask(command: string, asking?: Asking): Promise<Answer>;
  /** An unnumbered line at once, whatever is outstanding. */
  interrupt(line: string): void;
  /** Gives up what is in flight. */
  abandon(failure: LinkFailure): void;
  /** From here on in the family that the firmware was found to be of; before, as in a greeting. */
  speak(dialect: Dialect): void;
}

/** A command in flight: its line, and the lines that are still to prove it. */
interface InFlight {
  exchange: Exchange;
  readonly following: readonly string[];
  /** What the lines before this one answered. */
  readonly replies: readonly Reply[];
  readonly asking: Required<Omit<Asking, 'line'>>;
  readonly resolve: (answer: Answer) => void;
  calmDown: () => void;
}

export interface ConversationOptions {
  /** Lines bear numbers and checksums, unless the rig's profile says that they must not. */
  numbered?: boolean;
}

/** Speaks over `port`; every reply is told to `onReply` before the answer that it is part of. */
export function createConversation(
  port: Port,
  clock: Clock,
  onReply: (reply: Reply) => void,
  { numbered = true }: ConversationOptions = {},
): Conversation {
  return new PortConversation(port, clock, onReply, numbered);
}

class PortConversation implements Conversation {
  #dialect: Dialect = greetingDialect;
  #nextLine = 0;
  #keepaliveSeen = false;
  #inFlight: InFlight | null = null;

  constructor(
    private readonly port: Port,
    private readonly clock: Clock,
    onReply: (reply: Reply) => void,
    private readonly numbered: boolean,
  ) {
    const splitter = createSplitter();
    port.onData((text) => {
      for (const line of splitter.push(text)) {
        const reply = this.#dialect.read(line);
        onReply(reply);
        const flight = this.#inFlight;
        if (flight) {
          const event = { type: 'reply', reply, nowMs: clock.nowMs() } as const;
          this.#follow(flight, stepExchange(flight.exchange, event));
        }
      }
    });
    port.onClose(() => this.abandon('closed'));
  }

  ask(command: string, { expectedMs = 0, needs = null, line }: Asking = {}): Promise<Answer> {
    if (this.#inFlight) throw new Error('a line is in flight already');
    const [first, ...following] = this.#dialect.linesOf(command, needs);
    if (first === undefined) return Promise.resolve({ outcome: 'ok', replies: [] });
    if (line !== undefined) this.#nextLine = line;
    return new Promise((resolve) =>
      this.#begin(first, { following, replies: [], asking: { expectedMs, needs }, resolve }),
    );
  }

  interrupt(line: string): void {
    this.#write(`${line}\n`);
  }

  abandon(failure: LinkFailure): void {
    if (this.#inFlight) this.#finish(this.#inFlight, { outcome: 'failed', failure });
  }

  speak(dialect: Dialect): void {
    this.#dialect = dialect;
  }

  #begin(command: string, rest: Omit<InFlight, 'exchange' | 'calmDown'>): void {
    const { numbersModulo, acksOnReceipt } = this.#dialect;
    const isLast = rest.following.length === 0;
    const order = {
      manner: { numbered: this.numbered, numbersModulo, acksOnReceipt },
      line: this.#nextLine,
      command,
      expectedMs: rest.asking.expectedMs,
      needs: isLast ? neededOf(command, rest.asking.needs) : null,
      keepaliveSeen: this.#keepaliveSeen,
    };
    this.#nextLine = (this.#nextLine + 1) % numbersModulo;
    const step = beginExchange(order, this.clock.nowMs());
    const flight: InFlight = { ...rest, exchange: step.exchange, calmDown: () => undefined };
    this.#inFlight = flight;
    this.#follow(flight, step);
    if (this.#inFlight === flight) this.#watch(flight);
  }

  #follow(flight: InFlight, { exchange, write, end }: ExchangeStep): void {
    const moved = exchange.deadlineMs !== flight.exchange.deadlineMs;
    flight.exchange = exchange;
    this.#keepaliveSeen ||= exchange.keepaliveSeen;
    if (end) {
      if (end.outcome === 'failed') this.#finish(flight, end);
      else this.#goOn(flight, end.outcome);
      return;
    }
    if (write !== undefined && !this.#write(write)) {
      this.#finish(flight, { outcome: 'failed', failure: 'closed' });
      return;
    }
    if (moved) this.#watch(flight);
  }

  /** To the line that proves the one that ended, if there is any. */
  #goOn(flight: InFlight, outcome: 'ok' | 'taken'): void {
    const replies = [...flight.replies, ...flight.exchange.replies];
    const [next, ...following] = flight.following;
    if (next === undefined) return this.#finish(flight, { outcome, replies });
    flight.calmDown();
    const { asking, resolve } = flight;
    this.#begin(next, { following, replies, asking, resolve });
  }

  #watch(flight: InFlight): void {
    flight.calmDown();
    const leftMs = Math.max(0, flight.exchange.deadlineMs - this.clock.nowMs());
    flight.calmDown = this.clock.after(leftMs, () => {
      // A timer may fire a fraction of a millisecond early; the deadline has passed all the same.
      const nowMs = Math.max(this.clock.nowMs(), flight.exchange.deadlineMs);
      this.#follow(flight, stepExchange(flight.exchange, { type: 'deadline', nowMs }));
    });
  }

  #finish(flight: InFlight, answer: Answer): void {
    flight.calmDown();
    if (this.#inFlight === flight) this.#inFlight = null;
    flight.resolve(answer);
  }

  #write(text: string): boolean {
    try {
      this.port.write(text);
      return true;
    } catch (error) {
      if (error instanceof PortClosed) return false;
      throw error;
    }
  }
}

/** A line that proves another one by the rig's position is worth nothing without it. */
function neededOf(command: string, needs: ReplyKind | null): ReplyKind | null {
  return command === 'M114' ? 'position' : needs;
}
