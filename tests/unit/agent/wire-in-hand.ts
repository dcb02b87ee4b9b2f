import { readReply, type Reply } from '@/agent/dialect/reply';
import { beginExchange, stepExchange, type Exchange, type ExchangeStep } from '@/agent/link/exchange';

/** One line in flight with a clock that is moved by hand. */
export class WireInHand {
  nowMs = 0;
  exchange: Exchange;
  readonly written: string[] = [];
  end: ExchangeStep['end'];

  constructor(
    order: Partial<
      Pick<Exchange, 'line' | 'command' | 'expectedMs' | 'needs' | 'keepaliveSeen' | 'manner'>
    > = {},
    private readonly read: (text: string) => Reply = readReply,
  ) {
    const begun = beginExchange(
      { line: 28, command: 'G1 Z0 F600', expectedMs: 1_000, needs: null, keepaliveSeen: false, ...order },
      0,
    );
    this.exchange = begun.exchange;
    this.take(begun);
  }

  private take({ exchange, write, end }: ExchangeStep): void {
    this.exchange = exchange;
    if (write !== undefined) this.written.push(write);
    this.end ??= end;
  }

  hear(...lines: string[]): this {
    for (const line of lines) {
      if (this.end) break;
      this.take(stepExchange(this.exchange, { type: 'reply', reply: this.read(line), nowMs: this.nowMs }));
    }
    return this;
  }

  wait(ms: number): this {
    const untilMs = this.nowMs + ms;
    while (!this.end && this.exchange.deadlineMs <= untilMs) {
      this.nowMs = this.exchange.deadlineMs;
      this.take(stepExchange(this.exchange, { type: 'deadline', nowMs: this.nowMs }));
    }
    this.nowMs = untilMs;
    return this;
  }
}
