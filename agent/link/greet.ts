import { pause, type Clock } from '@/agent/clock';
import { dialectNamed, greetingDialect } from '@/agent/dialect/choose';
import { identify, refusalOfStranger } from '@/agent/dialect/identity';
import type { Reply } from '@/agent/dialect/reply';
import type { Firmware } from '@/lib/protocol/report';
import type { Conversation } from './conversation';
import type { LinkFailure } from './exchange';

/** Small boards say `start` within this after the port was opened (protocol.md 8). */
const BANNER_MS = 3_000;
/** After `start` come version and settings lines; talking begins when they have ended. */
const BANNER_QUIET_MS = 500;
const NEWLINE_MS = 100;
/** What a firmware can do may be told after the ok of `M115`. */
const CAPABILITIES_MS = 200;
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
  /** Whether the board called itself Marlin when it booted. */
  readonly marlinBanner: boolean;
  readonly capabilities: Readonly<Record<string, boolean>>;
  /** Resolves when `start` was heard, or after `ms`. */
  banner(ms: number): Promise<void>;
}

export function createEar(clock: Clock): Ear {
  let bannerSeen = false;
  let heardAtMs = clock.nowMs();
  let strange: string | null = null;
  let marlinBanner = false;
  const capabilities: Record<string, boolean> = {};
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
    get marlinBanner() {
      return marlinBanner;
    },
    capabilities,
    hear(reply) {
      heardAtMs = clock.nowMs();
      strange ??= refusalOfStranger(reply.text);
      marlinBanner ||= /^(?:echo:\s*)?Marlin\b/.test(reply.text);
      if (reply.kind === 'capability') capabilities[reply.name] = reply.has;
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

/**
 * From an open port to a firmware that is known, counts lines and is spoken to in its own dialect: wait for its start
 * or wake it with a newline, `N0 M110 N0`, `M115`. An ok that came late for a line of an earlier sender is not taken
 * for one of these.
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
  conversation.speak(greetingDialect);
  const numbered = await conversation.ask('M110 N0', { line: 0, expectedMs: GREETING_MS });
  if (numbered.outcome === 'failed') return strangerOr(ear, numbered.failure);
  for (let attempt = 0; attempt < 3; attempt += 1) {
    const told = await conversation.ask('M115', { expectedMs: GREETING_MS, needs: 'identity' });
    if (told.outcome === 'failed') return strangerOr(ear, told.failure);
    const named = told.replies.find((reply) => reply.kind === 'identity');
    if (!named) continue;
    if (Object.keys(ear.capabilities).length === 0) await pause(clock, CAPABILITIES_MS);
    return judge(conversation, ear, named.text);
  }
  return strangerOr(ear, 'out-of-step');
}

function judge(conversation: Conversation, ear: Ear, named: string): Greeting {
  const { bannerSeen, marlinBanner, capabilities } = ear;
  const identity = identify(named, { ...capabilities }, marlinBanner);
  if (!identity.known) return { outcome: 'stranger', reason: identity.reason };
  conversation.speak(dialectNamed(identity.firmware.dialect));
  return { outcome: 'met', firmware: identity.firmware, bannerSeen };
}

function strangerOr(ear: Ear, failure: LinkFailure): Greeting {
  return ear.strange ? { outcome: 'stranger', reason: ear.strange } : { outcome: 'failed', failure };
}
