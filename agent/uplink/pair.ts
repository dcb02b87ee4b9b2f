import { createHash, randomBytes } from 'node:crypto';
import { mkdir, readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { z } from 'zod';
import type { Clock } from '@/agent/clock';
import { fileErrorCode, removeDurably, writeDurably } from '@/agent/journal/durable-file';
import { EllwandError } from '@/lib/errors';
import { pairingAnswerSchema, type Pairing } from '@/lib/protocol/pairing';
import { PROTOCOL_VERSION } from '@/lib/protocol/version';
import { callServer } from './server-call';

const PAIR_TIMEOUT_MS = 10_000;
const TOKEN_BYTES = 32;
/** Read and written by the agent's user alone. */
const TOKEN_MODE = 0o600;

const identitySchema = z.object({
  /** The token is only ever sent to the server that gave it. */
  server: z.string(),
  agentId: z.uuid(),
  name: z.string(),
  token: z.string().min(32),
  /** SHA-256 of the code that bought it: another code in the configuration means "pair again". */
  pairedWith: z.string(),
});

/** What was proposed with a code; kept until the answer is, which may be lost on the way. */
const proposalSchema = identitySchema.pick({ token: true, pairedWith: true });

/** Who this agent is to its server. */
export type AgentIdentity = z.infer<typeof identitySchema>;

export interface PairOptions {
  server: string;
  dataDir: string;
  pairingCode?: string;
  software: string;
  clock: Clock;
  fetch: typeof fetch;
  closing: AbortSignal;
}

/**
 * The token kept from an earlier start; with a pairing code that was not used yet, a new one is bought and kept.
 * @throws EllwandError `token-refused` when there is neither, `pairing-refused` and others as the server says
 */
export async function obtainIdentity(options: PairOptions): Promise<AgentIdentity> {
  const { dataDir, server, pairingCode } = options;
  await mkdir(dataDir, { recursive: true });
  const kept = await keptIdentity(dataDir, pairingCode);
  const codeIsUsed = pairingCode === undefined || kept?.pairedWith === sumOf(pairingCode);
  if (kept && kept.server === server && codeIsUsed) return kept;
  if (pairingCode === undefined) {
    throw new EllwandError('token-refused', { details: { pairedFor: kept?.server ?? null } });
  }
  return pair(options, pairingCode);
}

/** A damaged file does not stand in the way of pairing anew. */
async function keptIdentity(dataDir: string, pairingCode: string | undefined): Promise<AgentIdentity | null> {
  try {
    return await loadIdentity(dataDir);
  } catch (cause) {
    if (pairingCode !== undefined && cause instanceof EllwandError) return null;
    throw cause;
  }
}

/** @returns null when this agent was never paired. @throws EllwandError `token-refused` when the file is damaged */
export async function loadIdentity(dataDir: string): Promise<AgentIdentity | null> {
  let text: string;
  try {
    text = await readFile(pathIn(dataDir), 'utf8');
  } catch (cause) {
    if (fileErrorCode(cause) === 'ENOENT') return null;
    throw cause;
  }
  try {
    return identitySchema.parse(JSON.parse(text));
  } catch (cause) {
    throw new EllwandError('token-refused', { details: { damagedFile: pathIn(dataDir) }, cause });
  }
}

async function pair(options: PairOptions, code: string): Promise<AgentIdentity> {
  const { server, clock, fetch, closing, software, dataDir } = options;
  const { token } = await proposalFor(dataDir, code);
  const body: Pairing = { protocol: 1, code, software, token };
  const result = await callServer(
    { address: server, token: null, clock, fetch, closing },
    { method: 'POST', path: '/api/agent/pair', body, timeoutMs: PAIR_TIMEOUT_MS },
  );
  if (!result.ok) throw new EllwandError(result.code, { details: result.details, cause: result.cause });
  const answer = pairingAnswerSchema.safeParse(result.body);
  if (!answer.success) {
    const details = { spoken: PROTOCOL_VERSION };
    throw new EllwandError('protocol-unknown', { details, cause: answer.error });
  }
  const identity: AgentIdentity = { server, ...answer.data, pairedWith: sumOf(code) };
  await writeDurably(pathIn(dataDir), JSON.stringify(identity, null, 2), TOKEN_MODE);
  await removeDurably(proposalIn(dataDir));
  return identity;
}

/** The token that goes with a code: the same at each try, so that a code whose answer was lost is not lost with it. */
async function proposalFor(dataDir: string, code: string): Promise<z.infer<typeof proposalSchema>> {
  const pairedWith = sumOf(code);
  const kept = await readProposal(dataDir);
  if (kept?.pairedWith === pairedWith) return kept;
  const proposal = { token: randomBytes(TOKEN_BYTES).toString('base64url'), pairedWith };
  await writeDurably(proposalIn(dataDir), JSON.stringify(proposal), TOKEN_MODE);
  return proposal;
}

/** A damaged proposal is worth nothing: another is made. */
async function readProposal(dataDir: string): Promise<z.infer<typeof proposalSchema> | null> {
  try {
    const parsed = proposalSchema.safeParse(JSON.parse(await readFile(proposalIn(dataDir), 'utf8')));
    return parsed.success ? parsed.data : null;
  } catch (cause) {
    if (cause instanceof SyntaxError || fileErrorCode(cause) === 'ENOENT') return null;
    throw cause;
  }
}

function proposalIn(dataDir: string): string {
  return join(dataDir, 'pairing.json');
}

function sumOf(code: string): string {
  return createHash('sha256').update(code, 'utf8').digest('hex');
}

function pathIn(dataDir: string): string {
  return join(dataDir, 'token.json');
}
