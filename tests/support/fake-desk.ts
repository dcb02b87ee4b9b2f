import { once } from 'node:events';
import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import {
  commandAnswerSchema,
  commandSchema,
  type Command,
  type CommandAnswer,
} from '@/lib/protocol/commands';
import { eventUploadSchema, type AgentEvent, type EventBody, type EventKind } from '@/lib/protocol/events';
import type { BoundRigs, RunProgram } from '@/lib/protocol/pairing';
import { reportSchema, type Report, type RigReport } from '@/lib/protocol/report';

const TOKEN = 'fake-desk-token-0123456789-0123456789';
export const DESK_PAIRING_CODE = 'pair-with-the-fake-desk';
const AGENT_ID = '00000000-0000-4000-8000-0000000000a9';

/** A small server that speaks the agent's protocol and keeps what it hears; stands in for the web part. */
export interface FakeDesk {
  readonly url: string;
  rigs: BoundRigs['rigs'];
  readonly programs: Map<string, RunProgram>;
  readonly events: AgentEvent[];
  readonly answers: Map<string, CommandAnswer>;
  /** The latest report of a rig. */
  report(rigId: string): RigReport | null;
  /** Events of one kind, in order. */
  said<Kind extends EventKind>(kind: Kind): Extract<EventBody, { kind: Kind }>[];
  /** Sends a command to the agent and waits for its answer. */
  give(command: Command): Promise<CommandAnswer>;
  /** Resolves when `happened` gives something but undefined, null or false; looked at whenever anything comes. */
  until<Found>(
    happened: () => Found | undefined | null | false,
    what: string,
    timeoutMs?: number,
  ): Promise<Found>;
  /** Takes no connection until it is opened again. */
  shut(): Promise<void>;
  open(): Promise<void>;
  close(): Promise<void>;
}

export async function openFakeDesk(): Promise<FakeDesk> {
  const desk = new Desk();
  await desk.open();
  return desk;
}

class Desk implements FakeDesk {
  rigs: BoundRigs['rigs'] = [];
  readonly programs = new Map<string, RunProgram>();
  readonly events: AgentEvent[] = [];
  readonly answers = new Map<string, CommandAnswer>();
  #reports = new Map<string, RigReport>();
  #journals = new Map<string, number>();
  #stream: ServerResponse | null = null;
  #listeners = new Set<() => void>();
  #server: Server | null = null;
  #port = 0;

  get url(): string {
    return `http://127.0.0.1:${this.#port}`;
  }

  async open(): Promise<void> {
    const server = createServer((request, response) => {
      this.#serve(request, response).catch((error: unknown) => {
        console.error('the fake desk could not answer', request.url, error);
        response.writeHead(500).end('{}');
      });
    });
    server.listen(this.#port, '127.0.0.1');
    await once(server, 'listening');
    this.#server = server;
    this.#port = (server.address() as AddressInfo).port;
  }

  async shut(): Promise<void> {
    const server = this.#server;
    this.#server = null;
    if (!server) return;
    const closed = once(server, 'close');
    server.close();
    server.closeAllConnections();
    await closed;
  }

  close(): Promise<void> {
    return this.shut();
  }

  report(rigId: string): RigReport | null {
    return this.#reports.get(rigId) ?? null;
  }

  said<Kind extends EventKind>(kind: Kind): Extract<EventBody, { kind: Kind }>[] {
    return this.events.flatMap(({ body }) =>
      body.kind === kind ? [body as Extract<EventBody, { kind: Kind }>] : [],
    );
  }

  async give(command: Command): Promise<CommandAnswer> {
    const stream = await this.until(() => this.#stream, 'the agent listens for commands');
    stream.write(`${JSON.stringify({ line: 'command', command: commandSchema.parse(command) })}\n`);
    return this.until(() => this.answers.get(command.id), `an answer to ${command.kind}`);
  }

  until<Found>(
    happened: () => Found | undefined | null | false,
    what: string,
    timeoutMs = 30_000,
  ): Promise<Found> {
    return new Promise((resolve, reject) => {
      const look = () => {
        const found = happened();
        if (found === undefined || found === null || found === false) return;
        clearTimeout(timer);
        this.#listeners.delete(look);
        resolve(found);
      };
      const timer = setTimeout(() => {
        this.#listeners.delete(look);
        reject(
          new Error(
            `not within ${timeoutMs} ms: ${what}; reports ${JSON.stringify([...this.#reports.values()])}`,
          ),
        );
      }, timeoutMs);
      this.#listeners.add(look);
      look();
    });
  }

  #changed(): void {
    for (const listener of [...this.#listeners]) listener();
  }

  async #serve(request: IncomingMessage, response: ServerResponse): Promise<void> {
    const path = request.url ?? '';
    const answer = (body: unknown, status = 200) =>
      response.writeHead(status, { 'content-type': 'application/json' }).end(JSON.stringify(body));
    if (path === '/api/agent/pair')
      return void answer({ agentId: AGENT_ID, name: 'bench', token: TOKEN }, 201);
    if (request.headers.authorization !== `Bearer ${TOKEN}`)
      return void answer({ code: 'token-refused' }, 401);
    if (path === '/api/agent/rigs') return void answer({ rigs: this.rigs });
    if (path === '/api/agent/commands') return this.#listen(request, response);
    const program = /^\/api\/agent\/runs\/([^/]+)\/program$/.exec(path)?.[1];
    if (program)
      return void answer(
        this.programs.get(program) ?? { code: 'not-found' },
        this.programs.has(program) ? 200 : 404,
      );
    const body: unknown = JSON.parse(await textOf(request));
    const commandId = /^\/api\/agent\/commands\/([^/]+)\/answer$/.exec(path)?.[1];
    if (commandId) this.#takeAnswer(commandId, commandAnswerSchema.parse(body));
    else if (path === '/api/agent/report') this.#takeReport(reportSchema.parse(body));
    else if (path === '/api/agent/events') {
      const storedThrough = this.#takeEvents(eventUploadSchema.parse(body));
      answer({ storedThrough });
      return this.#changed();
    } else return void answer({ code: 'not-found' }, 404);
    answer({ serverAt: new Date().toISOString() });
    this.#changed();
  }

  /** The first answer stands, as on the real desk. */
  #takeAnswer(commandId: string, answer: CommandAnswer): void {
    if (!this.answers.has(commandId)) this.answers.set(commandId, answer);
  }

  #takeReport({ rigs }: Report): void {
    for (const rig of rigs) this.#reports.set(rig.rigId, rig);
  }

  #takeEvents({ journalId, events }: { journalId: string; events: AgentEvent[] }): number {
    let through = this.#journals.get(journalId) ?? 0;
    for (const event of events) {
      if (event.sequence <= through) continue;
      if (event.sequence !== through + 1) throw new Error(`a gap before event ${event.sequence}`);
      through = event.sequence;
      this.events.push(event);
    }
    this.#journals.set(journalId, through);
    return through;
  }

  #listen(request: IncomingMessage, response: ServerResponse): void {
    response.writeHead(200, { 'content-type': 'application/x-ndjson' });
    const write = (line: object) => response.write(`${JSON.stringify(line)}\n`);
    write({ line: 'hello', protocol: 1, serverAt: new Date().toISOString() });
    const pings = setInterval(() => write({ line: 'ping', serverAt: new Date().toISOString() }), 2_000);
    this.#stream = response;
    request.on('close', () => {
      clearInterval(pings);
      if (this.#stream === response) this.#stream = null;
    });
    this.#changed();
  }
}

async function textOf(request: IncomingMessage): Promise<string> {
  let text = '';
  for await (const chunk of request.setEncoding('utf8')) text += String(chunk);
  return text;
}
