import type { ErrorCode } from '@/lib/errors';
import type { Command } from '@/lib/protocol/commands';
import { PROTOCOL_VERSION, STREAM_PING_MS } from '@/lib/protocol/version';
import { backOffMs, slowBackOffMs } from './back-off';
import type { Teller } from './notices';
import { headersFor, problemOf, type Server } from './server-call';
import { LineAssembler, readStreamLine } from './stream-lines';
import { isSlow } from './upload-step';
import { Deadline, pauseUntil } from './waiting';

/** What cannot be read may be of another version than this one. */
const SPOKEN = { spoken: PROTOCOL_VERSION };

/** Three missed pings. */
const SILENCE_MS = 3 * STREAM_PING_MS;
/** A stream that ends sooner than this is opened again with growing pauses. */
const LIVED_MS = 1_000;

interface Parts {
  server: Server;
  random: () => number;
  teller: Teller;
  deliver: (command: Command) => void;
  refuse: (commandId: string, code: ErrorCode) => void;
}

/** Listens for commands, and opens the stream again whenever it ends, until `closing` is aborted. */
export async function followCommands(parts: Parts): Promise<void> {
  const { clock, closing } = parts.server;
  let tries = 0;
  while (!closing.aborted) {
    const begunMs = clock.nowMs();
    const { code, heard } = await listenOnce(parts);
    if (closing.aborted) return;
    if (code) parts.teller.fails('commands', code, code === 'protocol-unknown' ? SPOKEN : {});
    if (heard && clock.nowMs() - begunMs >= LIVED_MS) tries = 0;
    else tries += 1;
    // However long it lived: what only a person can mend is not better at once.
    const isHopeless = code !== null && isSlow(code);
    if (tries === 0 && !isHopeless) continue;
    const ms = isHopeless ? slowBackOffMs(parts.random()) : backOffMs(tries, parts.random());
    await pauseUntil(clock, ms, closing);
  }
}

interface Ending {
  /** Why it ended; null: the server ended it. */
  code: ErrorCode | null;
  /** At least one line came. */
  heard: boolean;
}

async function listenOnce(parts: Parts): Promise<Ending> {
  const { server } = parts;
  const silence = new Deadline(server.clock, SILENCE_MS, server.closing);
  const ending: Ending = { code: null, heard: false };
  try {
    const response = await server.fetch(`${server.address}/api/agent/commands`, {
      headers: headersFor(server.token),
      signal: silence.signal,
    });
    if (!response.ok || !response.body) {
      const text = await response.text();
      return { code: problemOf(response.status, parsed(text)).code, heard: false };
    }
    await readLines(parts, response.body, () => {
      silence.renew();
      ending.heard = true;
    });
  } catch (cause) {
    ending.code = cause instanceof OtherProtocol ? 'protocol-unknown' : 'service-away';
  } finally {
    silence.end();
  }
  return ending;
}

class OtherProtocol extends Error {}

async function readLines(parts: Parts, body: ReadableStream<Uint8Array>, onLine: () => void): Promise<void> {
  const assembler = new LineAssembler();
  for await (const piece of body) {
    for (const line of assembler.take(piece)) {
      onLine();
      act(parts, line);
    }
  }
}

function act({ teller, deliver, refuse }: Parts, text: string | null): void {
  const read = text === null ? ({ read: 'nothing' } as const) : readStreamLine(text);
  if (read.read === 'other-protocol') throw new OtherProtocol();
  if (read.read === 'refuse') return refuse(read.commandId, read.code);
  if (read.read === 'nothing') {
    const left = 'A line of the command stream could not be read. It was left out.';
    teller.once('commands', 'bad-input', left, SPOKEN);
    return;
  }
  teller.works('commands');
  if (read.line.line === 'command') deliver(read.line.command);
}

function parsed(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return undefined;
  }
}
