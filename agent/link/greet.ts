import { pause, type Clock } from '@/agent/clock';
import { identify, refusalOfStranger, type Identity } from '@/agent/dialect/identity';
import type { Reply } from '@/agent/dialect/reply';
import type { Firmware } from '@/lib/protocol/report';
import type { Conversation } from './conversation';
import type { LinkFailure } from './exchange';

/** Small boards say `start` within this after the port was opened (protocol.md 8). */
const BANNER_MS = 3_000;
/** After `start` come version and settings lines; talking begins when they have ended. */
const BANNER_QUIET_MS = 500;
const NEWLINE_MS = 100;
const GREETING_MS = 10_000;

export type Greeting =
  | { outcome: 'met'; firmware: Firmware; bannerSeen: boolean }
  | { outcome: 'stranger'; reason: string }
  | { outcome: 'failed'; failure: LinkFailure };

/** Hears the replies of one port for the greeting and remembers what matters of them. */
export interface Ear {
  hear(reply: Reply): void;
  readonly bannerSeen: boolean;
  readonly heardAtMs: number;
  readonly strange: string | null;
  /** Resolves when `start` was heard, or after `ms`. */
  banner(ms: number): Promise<void>;
}

export function createEar(clock: Clock): Ear {
  let bannerSeen = false;
  let heardAtMs = clock.nowMs();
  let strange: string | null = null;
  let onBanner: (() => void) | null = null;
  return {
    get bannerSeen() {
      return bannerSeen;
    },
    get heardAtMs() {
      return heardAtMs;
    },
    get strange() {
      return strange;
    },
    hear(reply) {
      heardAtMs = clock.nowMs();
      strange ??= refusalOfStranger(reply.text);
      if (reply.kind !== 'start') return;
      bannerSeen = true;
      onBanner?.();
    },
    banner: (ms) =>
      new Promise((resolve) => {
        if (bannerSeen) {
          resolve();
          return;
        }
        const callOff = clock.after(ms, resolve);
        onBanner = () => {
          callOff();
          resolve();
        };
      }),
  };
}

async function untilQuiet(clock: Clock, ear: Ear): Promise<void> {
  const endMs = clock.nowMs() + BANNER_MS;
  for (;;) {
    const leftMs = ear.heardAtMs + BANNER_QUIET_MS - clock.nowMs();
    if (leftMs <= 0 || clock.nowMs() >= endMs) return;
    await pause(clock, leftMs);
  }
}

function identityOf(replies: readonly Reply[]): Identity | null {
  const named = replies.find((reply) => reply.kind === 'identity');
  if (!named) return null;
  const capabilities = Object.fromEntries(
    replies.flatMap((reply) => (reply.kind === 'capability' ? [[reply.name, reply.has] as const] : [])),
  );
  return identify(named.text, capabilities);
}

/**
 * From an open port to a firmware that is known and counts lines: wait for its start or wake it with a newline,
 * `N0 M110 N0`, `M115`. An ok that came late for a line of an earlier sender is not taken for one of these.
 */
export async function greet(
  conversation: Conversation,
  ear: Ear,
  clock: Clock,
  mayReset: boolean,
): Promise<Greeting> {
  if (mayReset) await ear.banner(BANNER_MS);
  if (!ear.bannerSeen) {
    conversation.interrupt('');
    await pause(clock, NEWLINE_MS);
  }
  await untilQuiet(clock, ear);
  const numbered = await conversation.ask('M110 N0', { line: 0, expectedMs: GREETING_MS });
  if (numbered.outcome === 'failed') return strangerOr(ear, numbered.failure);
  for (let attempt = 0; attempt < 3; attempt += 1) {
    const told = await conversation.ask('M115', { expectedMs: GREETING_MS, needs: 'identity' });
    if (told.outcome === 'failed') return strangerOr(ear, told.failure);
    const identity = identityOf(told.replies);
    if (identity?.known) return { outcome: 'met', firmware: identity.firmware, bannerSeen: ear.bannerSeen };
    if (identity) return { outcome: 'stranger', reason: identity.reason };
  }
  return strangerOr(ear, 'out-of-step');
}

function strangerOr(ear: Ear, failure: LinkFailure): Greeting {
  return ear.strange ? { outcome: 'stranger', reason: ear.strange } : { outcome: 'failed', failure };
}
