/** The version of what agent and server say to each other; sent as the header `ellwand-protocol`. */
export const PROTOCOL_VERSION = 1;

/** Header that names the protocol version on every request of an agent. */
export const PROTOCOL_HEADER = 'ellwand-protocol';

/** A command that moves something is refused by the agent when it is older than this. */
export const COMMAND_MAX_AGE_MS = 5_000;

/** How often an agent reports its rigs while nothing changes; a change is reported at once. */
export const REPORT_EVERY_MS = 1_000;

/** How often the server writes a line on an idle command stream; three missed lines mean a dead stream. */
export const STREAM_PING_MS = 2_000;

/** The most events in one upload. */
export const EVENTS_PER_BATCH_MAX = 500;
