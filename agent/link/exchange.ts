import { frameLine } from '@/lib/program/framing';
import type { Manner } from '@/agent/dialect/dialect';
import type { Reply, ReplyKind } from '@/agent/dialect/reply';
import { isSameNumber, proves, witnessedLine } from './evidence';

/** A `busy` comes every 2 s; two and a half of them missing is silence (protocol.md 3). */
const KEEPALIVE_SILENCE_MS = 5_000;
/** On top of the longest expected motion: the link, a slow board, a full planner. */
const MARGIN_MS = 3_000;
/** After a Resend the firmware is left alone until nothing was heard for so long. */
const QUIET_MS = 75;
/** A board that never falls quiet is not waited for any longer. */
const QUIET_MAX_MS = 2_000;
/** Between the bare newline and the repeated line. */
const NEWLINE_MS = 100;
/** A `wait` that comes sooner than this after a line may have been on its way before it. */
const WAIT_TRUSTED_MS = 1_000;
const RESENDS_MAX = 6;
const SILENCES_MAX = 3;
/** Replies kept of one exchange; a board that talks more is heard but not remembered. */
const REPLIES_MAX = 64;

export type LinkFailure = 'closed' | 'silent' | 'out-of-step' | 'reset' | 'halted';

/** One line in flight. `needs`: an ok without this kind of reply before it belongs to another line. */
export interface Exchange {
  readonly manner: Manner;
  readonly line: number;
  readonly command: string;
  readonly expectedMs: number;
  readonly needs: ReplyKind | null;
  readonly phase: 'awaiting' | 'quiet' | 'newline';
  /** What the firmware asked for before the quiet: this line again, or the next one. */
  readonly asked: 'again' | 'next';
  /** The firmware wants some other line: that it skips this one does not say that it has it. */
  readonly astray: boolean;
  /** Its ok was heard, and the reply that it needs was not yet. */
  readonly acknowledged: boolean;
  /** Oks to come that acknowledge nothing. */
  readonly idleOks: number;
  readonly resends: number;
  readonly silences: number;
  readonly replies: readonly Reply[];
  /** Replies before the line was last written. */
  readonly repliesBefore: number;
  readonly keepaliveSeen: boolean;
  readonly writtenMs: number;
  readonly quietSinceMs: number;
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

/** The main family with numbers: what a line is sent as unless something else is known. */
export const NUMBERED: Manner = { numbered: true, numbersModulo: 2 ** 31, acksOnReceipt: false };

function silenceAt(exchange: Pick<Exchange, 'keepaliveSeen' | 'expectedMs'>, nowMs: number): number {
  return nowMs + (exchange.keepaliveSeen ? KEEPALIVE_SILENCE_MS : exchange.expectedMs + MARGIN_MS);
}

function framed({ manner, line, command }: Pick<Exchange, 'manner' | 'line' | 'command'>): string {
  return `${manner.numbered ? frameLine(line, command) : command}\n`;
}

/** Begins with the line's first writing. */
export function beginExchange(
  order: Pick<Exchange, 'line' | 'command' | 'expectedMs' | 'needs' | 'keepaliveSeen'> & { manner?: Manner },
  nowMs: number,
): ExchangeStep {
  const exchange: Exchange = {
    ...order,
    manner: order.manner ?? NUMBERED,
    phase: 'awaiting',
    asked: 'again',
    astray: false,
    acknowledged: false,
    idleOks: 0,
    resends: 0,
    silences: 0,
    replies: [],
    repliesBefore: 0,
    writtenMs: nowMs,
    quietSinceMs: nowMs,
    deadlineMs: silenceAt(order, nowMs),
  };
  return { exchange, write: framed(exchange) };
}

function fail(exchange: Exchange, failure: LinkFailure): ExchangeStep {
  return { exchange, end: { outcome: 'failed', failure } };
}

function writeAgain(exchange: Exchange, nowMs: number): ExchangeStep {
  const next: Exchange = {
    ...exchange,
    phase: 'awaiting',
    idleOks: 0,
    repliesBefore: exchange.replies.length,
    writtenMs: nowMs,
    deadlineMs: silenceAt(exchange, nowMs),
  };
  return { exchange: next, write: framed(next) };
}

/** Nothing came in its time. Without numbers nobody could tell a line that was taken: it is never said again. */
function onSilence(exchange: Exchange, nowMs: number): ExchangeStep {
  if (!exchange.manner.numbered) return fail(exchange, 'silent');
  const silences = exchange.silences + 1;
  if (silences > SILENCES_MAX) return fail(exchange, 'silent');
  const next: Exchange = { ...exchange, silences, phase: 'newline', deadlineMs: nowMs + NEWLINE_MS };
  return { exchange: next, write: '\n' };
}

function onDeadline(exchange: Exchange, nowMs: number): ExchangeStep {
  if (nowMs < exchange.deadlineMs) return { exchange };
  if (exchange.phase === 'newline') return writeAgain(exchange, nowMs);
  if (exchange.phase === 'awaiting') return onSilence(exchange, nowMs);
  if (exchange.asked === 'next') return { exchange, end: { outcome: 'taken' } };
  if (exchange.resends > RESENDS_MAX) return fail(exchange, 'out-of-step');
  return writeAgain(exchange, nowMs);
}

function stillQuiet(exchange: Exchange, nowMs: number): ExchangeStep {
  const deadlineMs = Math.min(nowMs + QUIET_MS, exchange.quietSinceMs + QUIET_MAX_MS);
  return { exchange: { ...exchange, deadlineMs } };
}

function goQuiet(exchange: Exchange, change: Partial<Exchange>, nowMs: number): ExchangeStep {
  const deadlineMs = nowMs + QUIET_MS;
  return { exchange: { ...exchange, ...change, phase: 'quiet', quietSinceMs: nowMs, deadlineMs } };
}

/** The firmware asks for a line: this one again, or the next one, which means that it has this one. */
function onResend(exchange: Exchange, asked: number, nowMs: number): ExchangeStep {
  const { manner, line } = exchange;
  if (!manner.numbered) return fail(exchange, 'out-of-step');
  if (exchange.phase === 'quiet') return stillQuiet(exchange, nowMs);
  const resends = exchange.resends + 1;
  // The error before it names another line: a digit of one of them is damaged, and neither is believed.
  const witness = witnessedLine(exchange.replies.slice(exchange.repliesBefore));
  if (witness !== null && !isSameNumber(witness + 1, asked, manner)) {
    return goQuiet(exchange, { asked: 'again', resends }, nowMs);
  }
  // Line 1 out of the blue: the board has begun anew (protocol.md 0.5).
  if (asked === 1 && line > 1) return fail(exchange, 'reset');
  const isNext = isSameNumber(asked, line + 1, manner);
  const astray = !isNext && !isSameNumber(asked, line, manner);
  return goQuiet(exchange, { asked: isNext ? 'next' : 'again', astray, resends }, nowMs);
}

/** `skip`, then an ok that acknowledges nothing. */
function onSkip(exchange: Exchange, skipped: number, nowMs: number): ExchangeStep {
  if (exchange.phase === 'quiet') return stillQuiet(exchange, nowMs);
  const { manner, line, astray } = exchange;
  if (manner.numbered && isSameNumber(skipped, line, manner) && !astray) {
    return goQuiet(exchange, { asked: 'next' }, nowMs);
  }
  return { exchange: { ...exchange, idleOks: exchange.idleOks + 1 } };
}

function onOk(exchange: Exchange, reply: Extract<Reply, { kind: 'ok' }>): ExchangeStep {
  const { manner, needs, replies } = exchange;
  if (reply.line !== null && manner.numbered && !isSameNumber(reply.line, exchange.line, manner)) {
    return { exchange };
  }
  if (reply.line === null && exchange.idleOks > 0) {
    return { exchange: { ...exchange, idleOks: exchange.idleOks - 1 } };
  }
  if (needs === null || replies.some((heard) => proves(heard, needs))) {
    return { exchange, end: { outcome: 'ok' } };
  }
  // An ok with this line's number, or of a family that answers later, is this line's; its answer is still to come.
  const isOurs = manner.acksOnReceipt || reply.line !== null;
  return { exchange: isOurs ? { ...exchange, acknowledged: true } : exchange };
}

function onBusy(exchange: Exchange, nowMs: number): ExchangeStep {
  const deadlineMs = nowMs + KEEPALIVE_SILENCE_MS;
  return { exchange: { ...exchange, phase: 'awaiting', keepaliveSeen: true, deadlineMs } };
}

/** Of a board that talks too much only the answer itself is kept, in place of the last reply. */
function keptReplies({ replies, needs }: Exchange, reply: Reply): readonly Reply[] {
  if (replies.length < REPLIES_MAX) return [...replies, reply];
  return needs !== null && proves(reply, needs) ? [...replies.slice(0, -1), reply] : replies;
}

function onReply(before: Exchange, reply: Reply, nowMs: number): ExchangeStep {
  const exchange: Exchange = { ...before, replies: keptReplies(before, reply) };
  if (reply.kind === 'start') return fail(exchange, 'reset');
  if (reply.kind === 'halted') return fail(exchange, 'halted');
  if (reply.kind === 'resend') return onResend(exchange, reply.line, nowMs);
  if (reply.kind === 'skip') return onSkip(exchange, reply.line, nowMs);
  if (exchange.phase === 'quiet') return stillQuiet(exchange, nowMs);
  if (reply.kind === 'busy') return onBusy(exchange, nowMs);
  if (reply.kind === 'ok') return onOk(exchange, reply);
  // It waits for a line: it has none, or its ok was lost.
  const idle = reply.kind === 'wait' && nowMs - exchange.writtenMs >= WAIT_TRUSTED_MS;
  if (idle && exchange.phase === 'awaiting') return onSilence(exchange, nowMs);
  const complete = exchange.acknowledged && exchange.needs !== null && proves(reply, exchange.needs);
  return complete ? { exchange, end: { outcome: 'ok' } } : { exchange };
}

/** What follows from one reply or from the passing of the deadline; protocol.md 3 as a table. */
export function stepExchange(exchange: Exchange, event: ExchangeEvent): ExchangeStep {
  if (event.type === 'deadline') return onDeadline(exchange, event.nowMs);
  return onReply(exchange, event.reply, event.nowMs);
}
