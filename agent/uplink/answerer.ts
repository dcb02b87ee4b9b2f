import type { ErrorCode } from '@/lib/errors';
import type { CommandAnswer } from '@/lib/protocol/commands';
import { backOffMs, slowBackOffMs } from './back-off';
import type { Teller } from './notices';
import { callServer, type Server } from './server-call';
import { isSlow } from './upload-step';
import { pauseUntil } from './waiting';

const ANSWER_TIMEOUT_MS = 5_000;
/** After this the server has long given the command up. */
const ANSWER_MAX_AGE_MS = 10 * 60_000;
/** The oldest are given up beyond this. */
const OPEN_MAX = 1_000;

/** The server will not take this answer, now or later. */
const FINAL: ReadonlySet<ErrorCode> = new Set([
  'not-found',
  'bad-input',
  'illegal-step',
  'changed-meanwhile',
  'already-exists',
  'command-late',
  'command-replayed',
  'rig-not-bound',
]);

interface Open {
  /** By the forward clock. */
  sinceMs: number;
  answer: CommandAnswer | null;
}

/** Commands that came and are not yet answered for good; each answer is sent until the server takes it. */
export class Answerer {
  readonly #open = new Map<string, Open>();
  readonly #sending = new Set<Promise<void>>();

  constructor(
    private readonly server: Server,
    private readonly random: () => number,
    private readonly teller: Teller,
  ) {}

  /** @returns false when the same command came already and its answer is still on its way */
  begin(commandId: string): boolean {
    this.#forgetOld();
    if (this.#open.has(commandId)) return false;
    this.#open.set(commandId, { sinceMs: this.server.clock.nowMs(), answer: null });
    return true;
  }

  /** Sends the answer until it is taken. While one is on its way, the first stands. */
  answer(commandId: string, answer: CommandAnswer): void {
    const open = this.#open.get(commandId) ?? { sinceMs: this.server.clock.nowMs(), answer: null };
    if (open.answer) return;
    open.answer = answer;
    this.#open.set(commandId, open);
    const sending = this.#send(commandId, open, answer).finally(() => this.#sending.delete(sending));
    this.#sending.add(sending);
  }

  /** Resolves when nothing is being sent; to be called after `closing` was aborted. */
  async close(): Promise<void> {
    await Promise.all(this.#sending);
  }

  async #send(commandId: string, open: Open, answer: CommandAnswer): Promise<void> {
    const path = `/api/agent/commands/${commandId}/answer`;
    for (let tries = 1; this.#open.get(commandId) === open && !this.server.closing.aborted; tries += 1) {
      const request = { method: 'POST', path, body: answer, timeoutMs: ANSWER_TIMEOUT_MS } as const;
      const result = await callServer(this.server, request);
      if (this.server.closing.aborted) return;
      if (result.ok || FINAL.has(result.code)) return this.#settle(commandId, result.ok ? null : result.code);
      this.teller.fails('answers', result.code);
      const slow = isSlow(result.code);
      const ms = slow ? slowBackOffMs(this.random()) : backOffMs(tries, this.random());
      await pauseUntil(this.server.clock, ms, this.server.closing);
      this.#forgetOld();
    }
  }

  #settle(commandId: string, refusal: ErrorCode | null): void {
    this.#open.delete(commandId);
    if (refusal === null) return this.teller.works('answers');
    this.teller.once('answers', refusal, 'The server did not want this answer. It is dropped.', {
      commandId,
    });
  }

  #forgetOld(): void {
    const nowMs = this.server.clock.nowMs();
    for (const [commandId, open] of this.#open) {
      if (nowMs - open.sinceMs < ANSWER_MAX_AGE_MS && this.#open.size <= OPEN_MAX) break;
      this.#open.delete(commandId);
      if (!open.answer) continue;
      const text = 'An answer could not be delivered in time. It is given up.';
      this.teller.once('answers', 'service-away', text, { commandId });
    }
  }
}
