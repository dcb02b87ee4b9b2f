import { frameLine } from '@/lib/program/framing';
import type { Reply, ReplyKind } from '@/agent/dialect/reply';

/** A `busy` comes every 2 s; two and a half of them missing is silence (protocol.md 3). */
const KEEPALIVE_SILENCE_MS = 5_000;
/** On top of the longest expected motion: the link, a slow board, a full planner. */
const MARGIN_MS = 3_000;
/** After a Resend the firmware is left alone until nothing was heard for so long. */
const QUIET_MS = 75;
/** Between the bare newline and the repeated line. */
const NEWLINE_MS = 100;
const RESENDS_MAX = 6;
const SILENCES_MAX = 3;
/** Replies kept of one exchange; a board that talks more is heard but not remembered. */
const REPLIES_MAX = 64;

export type LinkFailure = 'closed' | 'silent' | 'out-of-step' | 'reset' | 'halted';

/** One numbered line in flight. `needs`: an ok without this kind of reply before it belongs to another line. */
export interface Exchange {
  readonly line: number;
  readonly command: string;
  readonly expectedMs: number;
  readonly needs: ReplyKind | null;
  readonly phase: 'awaiting' | 'quiet' | 'newline';
  /** What the firmware asked for before the quiet: this line again, or the next one. */
  readonly asked: 'again' | 'next';
  readonly resends: number;
  readonly silences: number;
  readonly replies: readonly Reply[];
  readonly keepaliveSeen: boolean;
  readonly deadlineMs: number;
}

export type ExchangeEvent =
  { type: 'reply'; reply: Reply; nowMs: number } | { type: 'deadline'; nowMs: number };

/** `taken`: the firmware has the line, its ok was lost, and what it answered may be lost too. */
export type ExchangeEnd = { outcome: 'ok' | 'taken' } | { outcome: 'failed'; failure: LinkFailure };

export interface ExchangeStep {
  exchange: Exchange;
  write?: string;
  end?: ExchangeEnd;
}

function silenceAt(exchange: Pick<Exchange, 'keepaliveSeen' | 'expectedMs'>, nowMs: number): number {
  return nowMs + (exchange.keepaliveSeen ? KEEPALIVE_SILENCE_MS : exchange.expectedMs + MARGIN_MS);
}

function framed(exchange: Pick<Exchange, 'line' | 'command'>): string {
  return `${frameLine(exchange.line, exchange.command)}\n`;
}

/** Begins with the line's first writing. */
export function beginExchange(
  order: Pick<Exchange, 'line' | 'command' | 'expectedMs' | 'needs' | 'keepaliveSeen'>,
  nowMs: number,
): ExchangeStep {
  const exchange: Exchange = {
    ...order,
    phase: 'awaiting',
    asked: 'again',
    resends: 0,
    silences: 0,
    replies: [],
    deadlineMs: silenceAt(order, nowMs),
  };
  return { exchange, write: framed(exchange) };
}

function fail(exchange: Exchange, failure: LinkFailure): ExchangeStep {
  return { exchange, end: { outcome: 'failed', failure } };
}

function writeAgain(exchange: Exchange, nowMs: number): ExchangeStep {
  const next: Exchange = { ...exchange, phase: 'awaiting', deadlineMs: silenceAt(exchange, nowMs) };
  return { exchange: next, write: framed(next) };
}

function onDeadline(exchange: Exchange, nowMs: number): ExchangeStep {
  if (nowMs < exchange.deadlineMs) return { exchange };
  if (exchange.phase === 'newline') return writeAgain(exchange, nowMs);
  if (exchange.phase === 'quiet') {
    if (exchange.asked === 'next') return { exchange, end: { outcome: 'taken' } };
    if (exchange.resends > RESENDS_MAX) return fail(exchange, 'out-of-step');
    return writeAgain(exchange, nowMs);
  }
  const silences = exchange.silences + 1;
  if (silences > SILENCES_MAX) return fail(exchange, 'silent');
  const next: Exchange = { ...exchange, silences, phase: 'newline', deadlineMs: nowMs + NEWLINE_MS };
  return { exchange: next, write: '\n' };
}

function onResend(exchange: Exchange, asked: number, nowMs: number): ExchangeStep {
  if (exchange.phase === 'quiet') return { exchange: { ...exchange, deadlineMs: nowMs + QUIET_MS } };
  // Line 1 out of the blue: the board has begun anew (protocol.md 0.5).
  if (asked === 1 && exchange.line > 1) return fail(exchange, 'reset');
  return {
    exchange: {
      ...exchange,
      phase: 'quiet',
      asked: asked === exchange.line + 1 ? 'next' : 'again',
      resends: exchange.resends + 1,
      deadlineMs: nowMs + QUIET_MS,
    },
  };
}

function answersIt(exchange: Exchange, reply: Extract<Reply, { kind: 'ok' }>): boolean {
  if (reply.line !== null && reply.line !== exchange.line) return false;
  return exchange.needs === null || exchange.replies.some(({ kind }) => kind === exchange.needs);
}

function onReply(before: Exchange, reply: Reply, nowMs: number): ExchangeStep {
  const room = before.replies.length < REPLIES_MAX;
  const exchange: Exchange = room ? { ...before, replies: [...before.replies, reply] } : before;
  if (reply.kind === 'start') return fail(exchange, 'reset');
  if (reply.kind === 'halted') return fail(exchange, 'halted');
  if (reply.kind === 'resend') return onResend(exchange, reply.line, nowMs);
  if (exchange.phase === 'quiet') return { exchange: { ...exchange, deadlineMs: nowMs + QUIET_MS } };
  if (reply.kind === 'busy') {
    return {
      exchange: {
        ...exchange,
        phase: 'awaiting',
        keepaliveSeen: true,
        deadlineMs: nowMs + KEEPALIVE_SILENCE_MS,
      },
    };
  }
  if (reply.kind === 'ok' && answersIt(exchange, reply)) return { exchange, end: { outcome: 'ok' } };
  return { exchange };
}

/** What follows from one reply or from the passing of the deadline; protocol.md 3 as a table. */
export function stepExchange(exchange: Exchange, event: ExchangeEvent): ExchangeStep {
  if (event.type === 'deadline') return onDeadline(exchange, event.nowMs);
  return onReply(exchange, event.reply, event.nowMs);
}
