/** The version of what agent and server say to each other; sent as the header `ellwand-protocol`. */
export const PROTOCOL_VERSION = 1;

/** Header that names the protocol version on every request of an agent. */
export const PROTOCOL_HEADER = 'ellwand-protocol';

/** Header in which an agent names its software on every request, as `ellwand-agent 0.2.0`. */
export const SOFTWARE_HEADER = 'ellwand-agent';

/** An older agent is given no rigs, no program and no start: what it does wrong is known and mended. */
export const LEAST_AGENT_VERSION = '0.2.0';

const SOFTWARE = /^ellwand-agent (\d{1,6})\.(\d{1,6})\.(\d{1,6})$/;

/**
 * Whether an agent of this software may start runs. @param software as the agent names itself; what is no version is
 * too old, and so is an agent that does not tell @param least the version that is just not too old
 */
export function isRecentAgent(software: string | null, least = LEAST_AGENT_VERSION): boolean {
  const version = SOFTWARE.exec(software ?? '')
    ?.slice(1)
    .map(Number);
  if (!version) return false;
  const wanted = least.split('.').map(Number);
  for (const [index, part] of version.entries()) {
    const difference = part - (wanted[index] ?? 0);
    if (difference !== 0) return difference > 0;
  }
  return true;
}

/** A command that moves something is refused by the agent when it is older than this. */
export const COMMAND_MAX_AGE_MS = 5_000;

/** How often an agent reports its rigs while nothing changes; a change is reported at once. */
export const REPORT_EVERY_MS = 1_000;

/** How often the server writes a line on an idle command stream; three missed lines mean a dead stream. */
export const STREAM_PING_MS = 2_000;

/** The most events in one upload. */
export const EVENTS_PER_BATCH_MAX = 500;
