import { EllwandError } from '@/lib/errors';
import type { Command, StreamLine } from '@/lib/protocol/commands';
import { PROTOCOL_VERSION } from '@/lib/protocol/version';
import { Outlet } from './outlet';

/** What an agent's command stream needs; each call reads the database anew. */
export interface AgentSource {
  agentId: string;
  takeCommands: (again: boolean) => Promise<Command[]>;
  /** Looks whether the token still stands. @throws EllwandError `token-refused` when it does not. */
  authenticate: () => Promise<unknown>;
  nowMs: () => number;
  onFailed: (cause: unknown) => void;
}

/** One agent's command stream: newline-delimited JSON, one line a command. */
export class AgentLines {
  readonly outlet = new Outlet();
  #again = true;
  #wanted = false;
  #busy = false;

  constructor(private readonly source: AgentSource) {
    this.#write({ line: 'hello', protocol: PROTOCOL_VERSION, serverAt: this.#serverAt() });
  }

  get agentId(): string {
    return this.source.agentId;
  }

  ping(): void {
    this.#write({ line: 'ping', serverAt: this.#serverAt() });
  }

  /** Writes what is there to be written; asked again while it does so, it looks once more. */
  async deliver(): Promise<void> {
    this.#wanted = true;
    if (this.#busy) return;
    this.#busy = true;
    try {
      while (this.#wanted && !this.outlet.closed) {
        this.#wanted = false;
        const commands = await this.source.takeCommands(this.#again);
        this.#again = false;
        for (const command of commands) this.#write({ line: 'command', command });
      }
    } catch (cause) {
      // The agent opens another stream, which begins with all that is open.
      this.source.onFailed(cause);
      this.outlet.close();
    } finally {
      this.#busy = false;
    }
  }

  /** Ends the stream when the token was revoked. */
  async recheck(): Promise<void> {
    try {
      await this.source.authenticate();
    } catch (cause) {
      if (!(cause instanceof EllwandError)) this.source.onFailed(cause);
      this.outlet.close();
    }
  }

  #serverAt(): string {
    return new Date(this.source.nowMs()).toISOString();
  }

  #write(line: StreamLine): void {
    this.outlet.write(`${JSON.stringify(line)}\n`);
  }
}
