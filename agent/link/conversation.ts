import type { Clock } from '@/agent/clock';
import { readReply, type Reply, type ReplyKind } from '@/agent/dialect/reply';
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
}

interface InFlight {
  exchange: Exchange;
  resolve: (answer: Answer) => void;
  calmDown: () => void;
}

/** Speaks over `port`; every reply is told to `onReply` before the answer that it is part of. */
export function createConversation(port: Port, clock: Clock, onReply: (reply: Reply) => void): Conversation {
  const splitter = createSplitter();
  let nextLine = 0;
  let keepaliveSeen = false;
  let inFlight: InFlight | null = null;

  const finish = (flight: InFlight, answer: Answer) => {
    flight.calmDown();
    if (inFlight === flight) inFlight = null;
    flight.resolve(answer);
  };
  const follow = (flight: InFlight, { exchange, write, end }: ExchangeStep) => {
    const moved = exchange.deadlineMs !== flight.exchange.deadlineMs;
    flight.exchange = exchange;
    keepaliveSeen ||= exchange.keepaliveSeen;
    if (end) {
      finish(flight, end.outcome === 'failed' ? end : { outcome: end.outcome, replies: exchange.replies });
      return;
    }
    if (write !== undefined && !written(port, write)) {
      finish(flight, { outcome: 'failed', failure: 'closed' });
      return;
    }
    if (moved) watch(flight);
  };
  const watch = (flight: InFlight) => {
    flight.calmDown();
    const leftMs = Math.max(0, flight.exchange.deadlineMs - clock.nowMs());
    flight.calmDown = clock.after(leftMs, () => {
      // A timer may fire a fraction of a millisecond early; the deadline has passed all the same.
      const nowMs = Math.max(clock.nowMs(), flight.exchange.deadlineMs);
      follow(flight, stepExchange(flight.exchange, { type: 'deadline', nowMs }));
    });
  };

  port.onData((text) => {
    for (const line of splitter.push(text)) {
      const reply = readReply(line);
      onReply(reply);
      if (inFlight)
        follow(inFlight, stepExchange(inFlight.exchange, { type: 'reply', reply, nowMs: clock.nowMs() }));
    }
  });
  port.onClose(() => {
    if (inFlight) finish(inFlight, { outcome: 'failed', failure: 'closed' });
  });

  return {
    ask(command, { expectedMs = 0, needs = null, line = nextLine } = {}) {
      if (inFlight) throw new Error('a line is in flight already');
      nextLine = line + 1;
      const nowMs = clock.nowMs();
      const step = beginExchange({ line, command, expectedMs, needs, keepaliveSeen }, nowMs);
      return new Promise((resolve) => {
        const flight: InFlight = { exchange: step.exchange, resolve, calmDown: () => undefined };
        inFlight = flight;
        follow(flight, step);
        if (inFlight === flight) watch(flight);
      });
    },
    interrupt(line) {
      written(port, `${line}\n`);
    },
    abandon(failure) {
      if (inFlight) finish(inFlight, { outcome: 'failed', failure });
    },
  };
}

function written(port: Port, text: string): boolean {
  try {
    port.write(text);
    return true;
  } catch (error) {
    if (error instanceof PortClosed) return false;
    throw error;
  }
}
