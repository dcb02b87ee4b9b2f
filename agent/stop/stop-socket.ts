import { rmSync } from 'node:fs';
import { createConnection, createServer, type Server, type Socket } from 'node:net';
import { join, relative } from 'node:path';
import { z } from 'zod';
import { agentStateSchema, type AgentState } from './state';

const requestSchema = z.union([
  z.object({ stop: z.string().min(1).nullable() }),
  z.object({ ask: z.literal('state') }),
]);
const answerSchema = z.object({ stopped: z.number().int().min(0) });

const LONGEST_REQUEST_CHARACTERS = 1_000;
/** More than the state of 64 rigs. */
const LONGEST_ANSWER_CHARACTERS = 1_000_000;
const ANSWER_MS = 5_000;

/** What may be asked of a running agent from its own computer. */
export interface StopAnswers {
  /** Given a rig's name or id, or null for all, stops them and tells how many that were. */
  stop: (rig: string | null) => number;
  /** Changes nothing. */
  state: () => AgentState;
}

/** Where the agent of this data folder listens for a stop; named from here when that is shorter: 107 bytes are the most. */
export function stopSocketPath(dataDir: string): string {
  const path = join(dataDir, 'stop.sock');
  const fromHere = relative(process.cwd(), path);
  return fromHere.length < path.length ? fromHere : path;
}

export interface StopSocket {
  close(): Promise<void>;
}

/**
 * Listens for a stop, or a question, from the rig's own computer; needs neither server nor network. A socket left by
 * a killed agent is replaced.
 */
export async function openStopSocket(dataDir: string, answers: StopAnswers): Promise<StopSocket> {
  const path = stopSocketPath(dataDir);
  rmSync(path, { force: true });
  const sockets = new Set<Socket>();
  const server = createServer((socket) => {
    sockets.add(socket);
    socket.on('close', () => sockets.delete(socket));
    socket.on('error', () => socket.destroy());
    serve(socket, answers);
  });
  await listen(server, path);
  return {
    close: () =>
      new Promise((resolve) => {
        for (const socket of sockets) socket.destroy();
        server.close(() => resolve());
      }),
  };
}

function listen(server: Server, path: string): Promise<void> {
  return new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(path, resolve);
  });
}

function serve(socket: Socket, answers: StopAnswers): void {
  let text = '';
  socket.setEncoding('utf8').on('data', (chunk: string) => {
    text += chunk;
    if (text.length > LONGEST_REQUEST_CHARACTERS) socket.destroy();
    if (!text.includes('\n')) return;
    const request = readLine(text, requestSchema);
    if (!request) {
      socket.destroy();
      return;
    }
    const answer = 'ask' in request ? answers.state() : { stopped: answers.stop(request.stop) };
    socket.end(`${JSON.stringify(answer)}\n`);
  });
}

function readLine<Shape>(text: string, schema: z.ZodType<Shape>): Shape | null {
  try {
    return schema.parse(JSON.parse(text.slice(0, text.indexOf('\n'))));
  } catch {
    return null;
  }
}

/**
 * Asks the running agent of this data folder to stop a rig (null: all). @returns how many rigs were told; null when no
 * agent runs there
 */
export async function askToStop(dataDir: string, rig: string | null): Promise<number | null> {
  return (await ask(dataDir, { stop: rig }, answerSchema))?.stopped ?? null;
}

/** What the running agent of this data folder tells of itself; null when none runs there. */
export function askForState(dataDir: string): Promise<AgentState | null> {
  return ask(dataDir, { ask: 'state' }, agentStateSchema);
}

function ask<Answer>(
  dataDir: string,
  question: z.infer<typeof requestSchema>,
  schema: z.ZodType<Answer>,
): Promise<Answer | null> {
  return new Promise((resolve) => {
    const socket = createConnection(stopSocketPath(dataDir));
    let text = '';
    socket.setTimeout(ANSWER_MS, () => socket.destroy());
    socket.setEncoding('utf8').on('data', (chunk: string) => {
      text += chunk;
      if (text.length > LONGEST_ANSWER_CHARACTERS) socket.destroy();
    });
    socket.on('connect', () => socket.write(`${JSON.stringify(question)}\n`));
    socket.on('error', () => resolve(null));
    socket.on('close', () => resolve(text.includes('\n') ? readLine(text, schema) : null));
  });
}
