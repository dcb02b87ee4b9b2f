import type { AgentConfig } from '@/agent/config';
import type { AgentEdges } from '@/agent/edges';
import { loadIdentity } from '@/agent/uplink/pair';
import { headersFor, problemOf } from '@/agent/uplink/server-call';
import { EllwandError, ERRORS, type ErrorCode } from '@/lib/errors';
import { boundRigsSchema, type BoundRigs } from '@/lib/protocol/pairing';
import { COMMAND_MAX_AGE_MS } from '@/lib/protocol/version';
import { adviceOnCall } from './advice';
import type { Problem, ServerFinding } from './findings';

const ANSWER_MS = 10_000;

interface Seen {
  server: ServerFinding;
  /** The rigs as the server tells them now; null when it did not. */
  bound: BoundRigs | null;
}

/** Asks the server for this agent's rigs, which changes nothing there. */
export async function lookAtServer(
  config: Pick<AgentConfig, 'server' | 'dataDir'>,
  edges: Pick<AgentEdges, 'fetch' | 'clock'>,
  problems: Problem[],
): Promise<Seen> {
  const server: ServerFinding = {
    address: config.server,
    reachable: false,
    tokenAccepted: false,
    clockSkewMs: null,
  };
  const tell = (code: string, says: string, toDo: string) =>
    problems.push({ about: 'server', code, says, toDo });
  const token = await tokenOf(config, tell);
  try {
    const sentMs = edges.clock.date().getTime();
    const response = await answerOf(config.server, token, edges);
    server.reachable = true;
    server.clockSkewMs = skewOf(response.headers.get('date'), sentMs, edges.clock.date().getTime());
    const skewMs = server.clockSkewMs ?? 0;
    if (Math.abs(skewMs) > COMMAND_MAX_AGE_MS) {
      const side = skewMs > 0 ? 'behind' : 'ahead of';
      const says = `This computer's clock is ${Math.round(Math.abs(skewMs) / 1_000)} s ${side} the server's.`;
      tell('clock-skew', says, 'Let both keep the time of the same time server (NTP).');
    }
    const body: unknown = await response.json().catch(() => undefined);
    const bound = response.ok ? boundRigsSchema.safeParse(body) : null;
    if (bound?.success) return { server: { ...server, tokenAccepted: true }, bound: bound.data };
    const code = response.ok ? 'protocol-unknown' : problemOf(response.status, body).code;
    if (token !== null) tell(code, ERRORS[code].title, toDoAbout(code));
  } catch (cause) {
    const { code, says, toDo } = adviceOnCall(config.server, cause);
    tell(code, says, toDo);
  }
  return { server, bound: null };
}

async function tokenOf(
  { server, dataDir }: Pick<AgentConfig, 'server' | 'dataDir'>,
  tell: (code: string, says: string, toDo: string) => void,
): Promise<string | null> {
  const pair = 'Make a pairing code in the set-up, write it into the configuration, and start the agent.';
  try {
    const identity = await loadIdentity(dataDir);
    if (identity?.server === server) return identity.token;
    const says = identity
      ? `This agent is paired with ${identity.server}, not with this server.`
      : 'This agent has not been paired yet.';
    tell('not-paired', says, pair);
  } catch (error) {
    if (error instanceof EllwandError) tell('token-damaged', 'The file with the token is damaged.', pair);
    else tell('token-unread', 'The file with the token cannot be read.', "Ask as the agent's own user.");
  }
  return null;
}

async function answerOf(
  server: string,
  token: string | null,
  { fetch, clock }: Pick<AgentEdges, 'fetch' | 'clock'>,
): Promise<Response> {
  const late = new AbortController();
  const callOff = clock.after(ANSWER_MS, () => late.abort());
  try {
    const response = await fetch(`${server}/api/agent/rigs`, {
      headers: headersFor(token),
      signal: late.signal,
    });
    const text = await response.text();
    return new Response(text, response);
  } finally {
    callOff();
  }
}

/** @param date of the answer, RFC 9110 */
function skewOf(date: string | null, sentMs: number, heardMs: number): number | null {
  const serverMs = Date.parse(date ?? '');
  // The date is cut to the second, so on the average half a second is missing.
  return Number.isNaN(serverMs) ? null : serverMs + 500 - (sentMs + heardMs) / 2;
}

function toDoAbout(code: ErrorCode): string {
  switch (code) {
    case 'token-refused':
      return 'Make a new pairing code in the set-up, write it into the configuration, and start the agent again.';
    case 'agent-too-old':
      return 'Build the agent from the sources that the server runs (npm run build:agent) and put it in place of this one.';
    case 'protocol-unknown':
      return 'Update the older of agent and server.';
    default:
      return "Look at the server's own log and health page.";
  }
}
