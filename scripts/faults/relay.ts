import { createServer, request, type IncomingMessage, type ServerResponse } from 'node:http';
import type { AddressInfo, Socket } from 'node:net';
import { setTimeout as pause } from 'node:timers/promises';

/** A late call waits for the next one, but not longer. */
const LATE_MOST_MS = 400;

interface Passed {
  status: number;
  headers: IncomingMessage['headers'];
  body: Buffer;
}

/** The network between one agent and the server, with whatever is wrong with it. */
export class Relay {
  #cutUntilMs = 0;
  #slowUntilMs = 0;
  #delayMs = 0;
  #twice = 0;
  #late = 0;
  #answersLost = 0;
  #release: () => void = () => undefined;
  readonly #sockets = new Set<Socket>();
  readonly #server = createServer((incoming, answer) => {
    this.#pass(incoming, answer).catch(() => answer.destroy());
  });

  private constructor(private readonly target: string) {
    this.#server.on('connection', (socket) => {
      if (Date.now() < this.#cutUntilMs) socket.destroy();
      this.#sockets.add(socket);
      socket.on('close', () => this.#sockets.delete(socket));
    });
  }

  /** @param target the server's address, without a slash at the end */
  static async open(target: string): Promise<Relay> {
    const relay = new Relay(target);
    await new Promise<void>((resolve) => relay.#server.listen(0, '127.0.0.1', resolve));
    return relay;
  }

  get url(): string {
    return `http://127.0.0.1:${(this.#server.address() as AddressInfo).port}`;
  }

  /** Every connection breaks, and none comes about for `forMs`. */
  cut(forMs: number): void {
    this.#cutUntilMs = Date.now() + forMs;
    for (const socket of this.#sockets) socket.destroy();
  }

  slow(forMs: number, delayMs: number): void {
    this.#slowUntilMs = Date.now() + forMs;
    this.#delayMs = delayMs;
  }

  /** The next calls reach the server twice. */
  twice(calls: number): void {
    this.#twice = calls;
  }

  /** The next calls reach the server after the ones that follow them. */
  late(calls: number): void {
    this.#late = calls;
  }

  /** The next calls reach the server, their answers nobody. */
  loseAnswers(calls: number): void {
    this.#answersLost = calls;
  }

  /** Everything passes again. */
  heal(): void {
    this.#cutUntilMs = 0;
    this.#slowUntilMs = 0;
    this.#twice = 0;
    this.#late = 0;
    this.#answersLost = 0;
    this.#release();
  }

  async close(): Promise<void> {
    for (const socket of this.#sockets) socket.destroy();
    await new Promise((resolve) => this.#server.close(resolve));
  }

  async #pass(incoming: IncomingMessage, answer: ServerResponse): Promise<void> {
    if (incoming.method === 'GET') return this.#stream(incoming, answer);
    const body = await bodyOf(incoming);
    if (Date.now() < this.#slowUntilMs) await pause(this.#delayMs);
    await this.#takeTurn();
    if (this.#twice > 0) {
      this.#twice -= 1;
      await this.#forward(incoming, body);
    }
    const passed = await this.#forward(incoming, body);
    if (this.#answersLost > 0) {
      this.#answersLost -= 1;
      answer.destroy();
      return;
    }
    answer.writeHead(passed.status, passed.headers).end(passed.body);
  }

  async #takeTurn(): Promise<void> {
    this.#release();
    this.#release = () => undefined;
    if (this.#late === 0) return;
    this.#late -= 1;
    await Promise.race([
      pause(LATE_MOST_MS),
      new Promise<void>((resolve) => {
        this.#release = resolve;
      }),
    ]);
  }

  #stream(incoming: IncomingMessage, answer: ServerResponse): Promise<void> {
    return new Promise((resolve, reject) => {
      const upward = this.#ask(incoming, (response) => {
        answer.writeHead(response.statusCode ?? 502, response.headers);
        response.pipe(answer);
        response.on('close', () => {
          answer.destroy();
          resolve();
        });
      });
      upward.on('error', reject);
      answer.on('close', () => upward.destroy());
      upward.end();
    });
  }

  #forward(incoming: IncomingMessage, body: Buffer): Promise<Passed> {
    return new Promise((resolve, reject) => {
      const upward = this.#ask(incoming, (response) => {
        bodyOf(response).then(
          (told) =>
            resolve({ status: response.statusCode ?? 502, headers: withoutLength(response), body: told }),
          reject,
        );
      });
      upward.on('error', reject);
      upward.end(body);
    });
  }

  #ask(incoming: IncomingMessage, onAnswer: (response: IncomingMessage) => void) {
    const { method, url = '/', headers } = incoming;
    const { host: _host, connection: _connection, ...passed } = headers;
    return request(`${this.target}${url}`, { method, headers: passed, agent: false }, onAnswer);
  }
}

function withoutLength({ headers }: IncomingMessage): IncomingMessage['headers'] {
  const {
    'content-length': _length,
    'transfer-encoding': _encoding,
    connection: _connection,
    ...rest
  } = headers;
  return rest;
}

async function bodyOf(message: IncomingMessage): Promise<Buffer> {
  const chunks: Buffer[] = [];
  for await (const chunk of message) chunks.push(chunk as Buffer);
  return Buffer.concat(chunks);
}
