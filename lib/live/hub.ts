import type { LiveMessage, RigDto, WaitingDto } from '@/lib/schemas/floor';
import type { News } from '@/lib/schemas/news';
import { AgentLines, type AgentSource } from './agent-lines';
import { asEvent, BrowserEvents, type BrowserSource } from './browser-events';
import { Coalescer } from './coalescer';

/** News of one rig within this are read once. */
const RIG_GAP_MS = 50;
/** Lists of batches are read by each browser that shows one: not more often than this. */
const BATCH_GAP_MS = 700;
const WAITING_GAP_MS = 300;

/** What the hub reads, once for all its streams. */
export interface HubSource {
  readRigs: (rigIds: string[]) => Promise<RigDto[]>;
  readWaiting: () => Promise<WaitingDto>;
  nowMs: () => number;
  onFailed: (cause: unknown) => void;
}

/** All open streams of this process. News come in by `take`; every reader gets what was read once. */
export class LiveHub {
  #browsers = new Set<BrowserEvents>();
  #agents = new Map<string, AgentLines>();
  #closed = false;
  readonly #rigs: Coalescer;
  readonly #batches: Coalescer;
  readonly #waiting: Coalescer;

  constructor(private readonly source: HubSource) {
    const { onFailed } = source;
    this.#rigs = new Coalescer(RIG_GAP_MS, (ids) => this.#sendRigs(ids), onFailed);
    this.#batches = new Coalescer(BATCH_GAP_MS, (ids) => this.#sendBatches(ids), onFailed);
    this.#waiting = new Coalescer(WAITING_GAP_MS, () => this.#sendWaiting(), onFailed);
  }

  openBrowser(reader: BrowserSource): ReadableStream<Uint8Array> {
    const events = new BrowserEvents(reader);
    if (this.#closed) events.outlet.close();
    this.#browsers.add(events);
    events.outlet.whenClosed(() => this.#browsers.delete(events));
    events.outlet.write(asEvent({ kind: 'hello', at: this.#at() }));
    return events.outlet.body;
  }

  /** A new stream of an agent takes the place of its last one, which may be dead without knowing. */
  openAgent(agent: AgentSource): ReadableStream<Uint8Array> {
    const lines = new AgentLines(agent);
    if (this.#closed) lines.outlet.close();
    this.#agents.get(agent.agentId)?.outlet.close();
    this.#agents.set(agent.agentId, lines);
    lines.outlet.whenClosed(() => {
      if (this.#agents.get(agent.agentId) === lines) this.#agents.delete(agent.agentId);
    });
    void lines.deliver();
    return lines.outlet.body;
  }

  take(news: News): void {
    switch (news.news) {
      case 'rig':
        return this.#rigs.add(news.rigId);
      case 'batch':
        this.#waiting.add('all');
        return this.#batches.add(news.batchId);
      case 'command':
        return void this.#agents.get(news.agentId)?.deliver();
      case 'agent':
        return void this.#agents.get(news.agentId)?.recheck();
      case 'person':
        return this.#recheck((browser) => browser.personId === news.personId);
      case 'command-answered':
      case 'outbox':
        return;
    }
  }

  /** News may have been missed: everybody reads anew. */
  refresh(): void {
    this.#send({ kind: 'hello', at: this.#at() });
    this.#recheck(() => true);
    for (const agent of this.#agents.values()) void agent.recheck().then(() => agent.deliver());
  }

  /** A sign of life to every reader. */
  tick(): void {
    this.#send({ kind: 'tick', at: this.#at() });
    for (const agent of this.#agents.values()) agent.ping();
  }

  /** Ends all streams, and every later one at once. */
  close(): void {
    this.#closed = true;
    for (const { outlet } of [...this.#browsers, ...this.#agents.values()]) outlet.close();
  }

  #at(): string {
    return new Date(this.source.nowMs()).toISOString();
  }

  #recheck(which: (browser: BrowserEvents) => boolean): void {
    for (const browser of this.#browsers) if (which(browser)) void browser.recheck(this.#at());
  }

  #send(message: LiveMessage): void {
    const event = asEvent(message);
    for (const { outlet } of this.#browsers) outlet.write(event);
  }

  async #sendRigs(rigIds: string[]): Promise<void> {
    if (this.#browsers.size === 0) return;
    for (const rig of await this.source.readRigs(rigIds)) {
      this.#send({ kind: 'rig', at: rig.at, rig });
      if (rig.run?.state === 'cutting') this.#batches.add(rig.run.batchId);
    }
  }

  async #sendBatches(batchIds: string[]): Promise<void> {
    const at = this.#at();
    for (const batchId of batchIds) this.#send({ kind: 'batch', at, batchId });
  }

  async #sendWaiting(): Promise<void> {
    if (this.#browsers.size === 0) return;
    this.#send({ kind: 'waiting', at: this.#at(), waiting: await this.source.readWaiting() });
  }
}
