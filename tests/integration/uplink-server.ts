import { once } from 'node:events';
import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http';
import type { AddressInfo, Socket } from 'node:net';
import { z } from 'zod';
import { ERRORS, type ErrorCode } from '@/lib/errors';
import { eventUploadSchema, type AgentEvent } from '@/lib/protocol/events';

/** One request as it came in. */
export interface Heard {
  method: string;
  path: string;
  headers: IncomingMessage['headers'];
  body: unknown;
  atMs: number;
}

/** What is done to one request: the connection is cut before or after it was carried out, or it is refused. */
export type Mishap =
  'cut-before' | 'cut-after' | { refuse: ErrorCode; details?: Record<string, unknown> } | { answer: unknown };

export const TOKEN = 'a-token-of-at-least-thirty-two-characters';

/**
 * A server as an agent meets it, over real HTTP: it stores events as the contract says (in order, replays once,
 * gaps and other content refused) and keeps command streams open for the test to write to.
 */
export class TestServer {
  readonly heard: Heard[] = [];
  readonly stored = new Map<string, AgentEvent[]>();
  readonly streams: ServerResponse[] = [];
  /** Answers to other paths than those of events and commands, by path. */
  readonly answers = new Map<string, unknown>();
  /** The version that new command streams say hello with. */
  protocol = 1;
  mishap: (heard: Heard) => Mishap | null = () => null;
  #server: Server | null = null;
  #sockets = new Set<Socket>();
  #port = 0;
  #watchers = new Set<() => void>();

  get address(): string {
    return `http://127.0.0.1:${this.#port}`;
  }

  /** Begins to listen, on the same port as before. */
  async open(): Promise<void> {
    const server = createServer((request, response) => void this.#take(request, response));
    server.on('connection', (socket) => {
      this.#sockets.add(socket);
      socket.on('close', () => this.#sockets.delete(socket));
    });
    server.listen(this.#port, '127.0.0.1');
    await once(server, 'listening');
    this.#port = (server.address() as AddressInfo).port;
    this.#server = server;
  }

  /** Goes away with all connections, as a killed process does. */
  async close(): Promise<void> {
    if (!this.#server) return;
    const closed = once(this.#server, 'close');
    this.#server.close();
    for (const socket of this.#sockets) socket.destroy();
    await closed;
    this.#server = null;
  }

  /** Resolves once `holds` is true; looked at after each request. */
  async until(holds: () => boolean): Promise<void> {
    while (!holds()) {
      await new Promise<void>((resolve) => {
        const look = () => {
          this.#watchers.delete(look);
          resolve();
        };
        this.#watchers.add(look);
      });
    }
  }

  to(path: string): Heard[] {
    return this.heard.filter((heard) => heard.path === path);
  }

  /** What was said in the stored events of a journal, in order. */
  linesOf(journalId: string): string[] {
    return (this.stored.get(journalId) ?? []).map(({ sequence, body }) =>
      body.kind === 'firmware-said' ? `${sequence}: ${body.text}` : `${sequence}: ${body.kind}`,
    );
  }

  changed(): void {
    for (const look of [...this.#watchers]) look();
  }

  async #take(request: IncomingMessage, response: ServerResponse): Promise<void> {
    const heard = await read(request);
    if (!heard) return;
    const mishap = this.mishap(heard);
    const reply = mishap === 'cut-before' ? null : this.#carryOut(heard, mishap);
    // The answer is not even written: what is written reaches the agent though the connection is cut after it.
    if (mishap === 'cut-before' || mishap === 'cut-after') request.socket.destroy();
    else if (reply) send(response, reply);
    else this.#stream(response);
    this.heard.push(heard);
    this.changed();
  }

  /** @returns null for a command stream, which stays open */
  #carryOut(heard: Heard, mishap: Mishap | null): Reply | null {
    if (typeof mishap === 'object' && mishap !== null) {
      return 'refuse' in mishap
        ? refusal(mishap.refuse, mishap.details)
        : { status: 200, body: mishap.answer };
    }
    if (heard.headers.authorization !== `Bearer ${TOKEN}`) return refusal('token-refused');
    if (heard.path === '/api/agent/commands') return null;
    if (heard.path === '/api/agent/events') return this.#store(heard.body);
    if (heard.path === '/api/agent/report') {
      return { status: 200, body: { serverAt: new Date().toISOString() } };
    }
    if (/^\/api\/agent\/commands\/[^/]+\/answer$/.test(heard.path)) return { status: 200, body: {} };
    const body = this.answers.get(heard.path);
    return body === undefined ? refusal('not-found') : { status: 200, body };
  }

  #stream(response: ServerResponse): void {
    response.writeHead(200, { 'content-type': 'application/x-ndjson' });
    const hello = { line: 'hello', protocol: this.protocol, serverAt: new Date().toISOString() };
    response.write(`${JSON.stringify(hello)}\n`);
    this.streams.push(response);
  }

  #store(body: unknown): Reply {
    const { journalId, events } = eventUploadSchema.parse(body);
    const stored = [...(this.stored.get(journalId) ?? [])];
    for (const event of events) {
      const expected = stored.length + 1;
      if (event.sequence > expected) return refusal('journal-gap', { expected });
      const same = stored[event.sequence - 1];
      if (!same) stored.push(event);
      else if (JSON.stringify(same) !== JSON.stringify(event)) return refusal('event-conflict');
    }
    this.stored.set(journalId, stored);
    return { status: 200, body: { storedThrough: stored.length } };
  }
}

interface Reply {
  status: number;
  body: unknown;
}

async function read(request: IncomingMessage): Promise<Heard | null> {
  const pieces: Buffer[] = [];
  try {
    for await (const piece of request) pieces.push(z.instanceof(Buffer).parse(piece));
  } catch {
    return null; // The agent went away in the middle of its request.
  }
  const text = Buffer.concat(pieces).toString('utf8');
  return {
    method: request.method ?? '',
    path: request.url ?? '',
    headers: request.headers,
    body: text === '' ? undefined : JSON.parse(text),
    atMs: performance.now(),
  };
}

function send(response: ServerResponse, { status, body }: Reply): void {
  const contentType = status === 200 ? 'application/json' : 'application/problem+json';
  response.writeHead(status, { 'content-type': contentType });
  response.end(JSON.stringify(body));
}

function refusal(code: ErrorCode, details: Record<string, unknown> = {}): Reply {
  const { status, title } = ERRORS[code];
  return { status, body: { title, status, code, details } };
}
