import type { AgentConfig } from '@/agent/config';
import type { AgentEdges } from '@/agent/edges';
import { backOffMs } from '@/agent/uplink/back-off';
import { loadCachedRigs, saveCachedRigs } from '@/agent/uplink/rigs-cache';
import type { Uplink } from '@/agent/uplink/uplink';
import { pauseUntil } from '@/agent/uplink/waiting';
import { EllwandError, type ErrorCode } from '@/lib/errors';
import type { BoundRigs } from '@/lib/protocol/pairing';

/** Answers that only a person can change. Any other may be of something that stands before the server. */
const REFUSALS: readonly ErrorCode[] = ['agent-too-old', 'token-refused', 'protocol-unknown'];

type Asking = Pick<AgentEdges, 'clock' | 'random' | 'log'>;

/**
 * Asks again while the server is away. @returns null when `closing` was aborted
 * @throws EllwandError for what only a person can mend
 */
export async function untilReached<Value>(
  call: () => Promise<Value>,
  { clock, random, log }: Asking,
  closing: AbortSignal,
): Promise<Value | null> {
  for (let tries = 1; !closing.aborted; tries += 1) {
    try {
      return await call();
    } catch (error) {
      if (!isAway(error)) throw error;
      const message = `The server does not answer${reasonOf(error)}. It is asked again.`;
      if (tries === 1) log({ level: 'warning', code: 'service-away', message });
      await pauseUntil(clock, backOffMs(tries, random()), closing);
    }
  }
  return null;
}

/**
 * The rigs as the server says now, or as it said last when it does not answer (law 7). What it refuses is refused:
 * an agent that it finds too old starts nothing by what it heard before.
 */
export async function boundRigs(
  { dataDir }: Pick<AgentConfig, 'dataDir'>,
  uplink: Pick<Uplink, 'fetchRigs'>,
  asking: Asking,
  closing: AbortSignal,
): Promise<BoundRigs | null> {
  const kept = await loadCachedRigs(dataDir);
  try {
    const rigs = await (kept ? uplink.fetchRigs() : untilReached(() => uplink.fetchRigs(), asking, closing));
    if (rigs) await saveCachedRigs(dataDir, rigs);
    return rigs;
  } catch (error) {
    if (!kept || !(error instanceof EllwandError) || REFUSALS.includes(error.code)) throw error;
    const message = 'The server does not answer. The rigs are taken as it told them last.';
    asking.log({ level: 'warning', code: 'service-away', message });
    return kept;
  }
}

function isAway(error: unknown): error is EllwandError {
  return error instanceof EllwandError && error.code === 'service-away';
}

/** What the network said, which tells a wrong certificate from a server that is off. */
function reasonOf({ cause }: EllwandError): string {
  const inner = cause instanceof Error && cause.cause instanceof Error ? cause.cause : cause;
  return inner instanceof Error ? ` (${inner.message})` : '';
}
