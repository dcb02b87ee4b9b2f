import { setMaxListeners } from 'node:events';
import type { Clock } from '@/agent/clock';
import type { EventSource, Journal } from '@/agent/journal/contract';
import type { Command, CommandAnswer } from '@/lib/protocol/commands';
import type { BoundRigs, RunProgram } from '@/lib/protocol/pairing';
import type { RigReport } from '@/lib/protocol/report';
import { Answerer } from './answerer';
import { askForProgram, askForRigs } from './ask';
import { followCommands } from './command-stream';
import { uploadEvents } from './event-uploader';
import { Teller, type Say } from './notices';
import { refusalOf } from './refusal';
import { reportRigs } from './reporter';
import type { Server } from './server-call';
import { SkewMeter } from './skew';
import { Bell } from './waiting';

/** All of the agent's talk with the server. Nothing of it ever waits for the server to be there. */
export interface Uplink {
  start(): void;
  /** Ends every call. What is not acknowledged goes up after the next start. */
  close(): Promise<void>;
  /** What the rigs are now: sent at once, changes within 50 ms together, and repeated each second. */
  report(rigs: RigReport[]): void;
  /** Sent until the server takes it or ten minutes have passed. */
  answer(commandId: string, answer: CommandAnswer): void;
  /** @throws EllwandError with the server's code, `service-away` without an answer, `program-refused` on a wrong sum */
  fetchProgram(runId: string): Promise<RunProgram>;
  /** @throws EllwandError with the server's code, `service-away` without an answer */
  fetchRigs(): Promise<BoundRigs>;
  /** Server minus agent, from the shortest of the last round trips; 0 while nothing was measured. */
  readonly clockSkewMs: number;
  /**
   * Who carries out commands; to be set before `start`. A command that the server repeats while its answer is on
   * its way is not given out again; one repeated later is, and must be refused as replayed.
   */
  onCommand(listener: (command: Command) => void): void;
}

export interface UplinkOptions {
  /** The server's address without a slash at the end. */
  server: string;
  token: string;
  journal: Pick<Journal<never>, keyof EventSource | 'earlier' | 'onAppend'>;
  /** Name and version of this software. */
  software: string;
  clock: Clock;
  /** In [0, 1). */
  random: () => number;
  fetch: typeof fetch;
  /** Told when something about the link changes. */
  say: Say;
}

export function createUplink(options: UplinkOptions): Uplink {
  return new ServerUplink(options);
}

class ServerUplink implements Uplink {
  readonly #closing = new AbortController();
  readonly #server: Server;
  readonly #teller: Teller;
  readonly #answerer: Answerer;
  readonly #skew = new SkewMeter();
  readonly #newEvents = new Bell();
  readonly #newReport = new Bell();
  #rigs: RigReport[] = [];
  #listener: ((command: Command) => void) | null = null;
  #running: Promise<void>[] = [];

  constructor(private readonly options: UplinkOptions) {
    const { server: address, token, clock } = options;
    this.#server = { address, token, clock, fetch: options.fetch, closing: this.#closing.signal };
    // One listener for each call that is under way, however many.
    setMaxListeners(0, this.#closing.signal);
    this.#teller = new Teller(options.say);
    this.#answerer = new Answerer(this.#server, options.random, this.#teller);
  }

  get clockSkewMs(): number {
    return this.#skew.skewMs;
  }

  start(): void {
    if (this.#running.length > 0) return;
    const stopListening = this.options.journal.onAppend(() => this.#newEvents.ring());
    this.#closing.signal.addEventListener('abort', stopListening);
    this.#running = [this.#upload(), this.#report(), this.#follow()];
  }

  async close(): Promise<void> {
    this.#closing.abort();
    this.#newEvents.ring();
    this.#newReport.ring();
    await Promise.all([...this.#running, this.#answerer.close()]);
  }

  report(rigs: RigReport[]): void {
    this.#rigs = rigs;
    this.#newReport.ring();
  }

  answer(commandId: string, answer: CommandAnswer): void {
    this.#answerer.answer(commandId, answer);
  }

  fetchProgram(runId: string): Promise<RunProgram> {
    return askForProgram(this.#server, this.options.random, runId);
  }

  fetchRigs(): Promise<BoundRigs> {
    return askForRigs(this.#server, this.options.random);
  }

  onCommand(listener: (command: Command) => void): void {
    this.#listener = listener;
  }

  async #upload(): Promise<void> {
    const { journal, random } = this.options;
    const parts = { server: this.#server, random, teller: this.#teller };
    for (const source of journal.earlier) await uploadEvents({ ...parts, bell: null, source });
    await uploadEvents({ ...parts, bell: this.#newEvents, source: journal });
  }

  #report(): Promise<void> {
    const { journal, random, software } = this.options;
    return reportRigs({
      server: this.#server,
      random,
      teller: this.#teller,
      skew: this.#skew,
      bell: this.#newReport,
      software,
      journal: { id: journal.id, backlog: () => backlogOf([...journal.earlier, journal]) },
      rigs: () => this.#rigs,
    });
  }

  #follow(): Promise<void> {
    return followCommands({
      server: this.#server,
      random: this.options.random,
      teller: this.#teller,
      deliver: (command) => this.#deliver(command),
      refuse: (commandId, code) => {
        const at = this.#server.clock.date().toISOString();
        if (this.#answerer.begin(commandId)) this.answer(commandId, refusalOf(code, at));
      },
    });
  }

  #deliver(command: Command): void {
    const listener = this.#listener;
    if (listener && this.#answerer.begin(command.id)) listener(command);
  }
}

function backlogOf(sources: readonly EventSource[]): number {
  return sources.reduce((sum, source) => sum + Math.max(0, source.lastSequence - source.acknowledged), 0);
}
