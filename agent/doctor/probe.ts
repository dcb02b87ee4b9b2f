import type { AgentEdges } from '@/agent/edges';
import { createConversation } from '@/agent/link/conversation';
import { createEar, greet } from '@/agent/link/greet';
import type { Port } from '@/agent/link/port';
import { resetNotice } from '@/agent/rig/reset-notice';
import { readHeaters, readSwitches } from '@/agent/runner/signals';
import { unreadSignals } from '@/agent/runner/state';
import type { Profile } from '@/lib/program/profile';
import type { Firmware } from '@/lib/protocol/report';
import type { Signals } from '@/lib/protocol/signals';

/** For a rig whose profile nobody has told yet. */
const UNKNOWN_SERIAL: Profile['serial'] = { baudRate: 115_200, resetsOnOpen: true };

export type Probed =
  | { met: true; firmware: Firmware; signals: Signals | null; notice: string | null }
  | { met: false; code: string; reason: string };

/**
 * Opens a port, asks who is there, reads switches and heaters, and closes it. Sends nothing that moves. `signals` is
 * null without a profile, which says what is fitted.
 */
export async function probe(
  { openPort, clock }: Pick<AgentEdges, 'openPort' | 'clock'>,
  path: string,
  profile: Profile | null,
): Promise<Probed> {
  const serial = profile?.serial ?? UNKNOWN_SERIAL;
  let port: Port;
  try {
    port = await openPort({ path, baudRate: serial.baudRate });
  } catch (error) {
    const reason = error instanceof Error ? error.message : 'The port does not open.';
    return { met: false, code: 'port-closed', reason };
  }
  try {
    return await ask(port, clock, serial, profile);
  } finally {
    await port.close();
  }
}

async function ask(
  port: Port,
  clock: AgentEdges['clock'],
  serial: Profile['serial'],
  profile: Profile | null,
): Promise<Probed> {
  const ear = createEar(clock);
  const conversation = createConversation(port, clock, (reply) => ear.hear(reply));
  const greeting = await greet(conversation, ear, clock, serial.resetsOnOpen);
  if (greeting.outcome === 'stranger') return { met: false, code: 'port-refused', reason: greeting.reason };
  if (greeting.outcome === 'failed') {
    return { met: false, code: 'rig-mute', reason: `Nobody answers at ${serial.baudRate} baud.` };
  }
  const { firmware, bannerSeen } = greeting;
  if (!profile) return { met: true, firmware, signals: null, notice: null };
  const readAt = clock.date().toISOString();
  const switches = await conversation.ask('M119', { needs: 'switches' });
  const heaters = await conversation.ask('M105');
  let signals = unreadSignals(profile);
  if (switches.outcome !== 'failed') signals = readSwitches(signals, profile, switches.replies, readAt);
  if (heaters.outcome !== 'failed') signals = readHeaters(signals, profile, heaters.replies, readAt);
  return { met: true, firmware, signals, notice: resetNotice(serial.resetsOnOpen, bannerSeen) };
}
