import { join } from 'node:path';
import type { AgentConfig } from './config';
import type { AgentEdges } from './edges';
import { Fleet } from './fleet/fleet';
import { rigStarter } from './fleet/start-rig';
import { boundRigs, untilReached } from './fleet/ask-server';
import { openJournal } from './journal/journal';
import { openProgramStore } from './programs/store';
import { createRecorder } from './rig/recorder';
import { isSnapshot, journalNoteSchema } from './runner/notes';
import { SOFTWARE } from './software';
import { createLinkBook } from './stop/link-book';
import { openStopSocket } from './stop/stop-socket';
import { obtainIdentity } from './uplink/pair';
import { createUplink } from './uplink/uplink';
import { pauseUntil } from './uplink/waiting';

const REPORT_EVERY_MS = 1_000;

/**
 * An agent from its start to the abort of `closing`, which it aborts itself when it can keep no record any more.
 * @throws EllwandError for what only a person can mend, JournalError when another agent works in the folder
 */
export async function runAgent(
  config: AgentConfig,
  edges: AgentEdges,
  closing: AbortController,
): Promise<void> {
  const { clock, log } = edges;
  const { journal, history, damaged } = await openJournal({
    dir: join(config.dataDir, 'journal'),
    randomId: edges.randomId,
    noteSchema: journalNoteSchema,
    isSnapshot,
    onDamage: ({ kind, path, offset }) =>
      log({ level: 'error', code: 'journal-damaged', message: `${kind} in ${path} at byte ${offset}` }),
  });
  try {
    const programs = await openProgramStore(config.dataDir);
    const recorder = createRecorder(journal, history);
    await recorder.event({ kind: 'agent-started', software: SOFTWARE }, clock.date());
    const pairing = { ...config, software: SOFTWARE, clock, fetch: edges.fetch, closing: closing.signal };
    const identity = await untilReached(() => obtainIdentity(pairing), edges, closing.signal);
    if (!identity) return;
    const link = createLinkBook(log);
    const { server } = config;
    const uplink = createUplink({
      ...edges,
      server,
      token: identity.token,
      journal,
      software: SOFTWARE,
      say: link.note,
    });
    const startRig = rigStarter({ config, edges, recorder, programs, uplink, damaged, closing });
    const fleet: Fleet = new Fleet({ config, uplink, date: () => clock.date(), startRig, log });
    const stopSocket = await openStopSocket(config.dataDir, {
      stop: (rig) => fleet.stop(rig),
      state: () => ({
        software: SOFTWARE,
        rigs: fleet.state(),
        journal: {
          id: journal.id,
          unacknowledged: Math.max(0, journal.lastSequence - journal.acknowledged),
          earlier: journal.earlier.length,
          full: journal.full,
          damaged,
        },
        link: link.troubles,
        clockSkewMs: uplink.clockSkewMs,
      }),
    });
    try {
      uplink.onCommand((command) => fleet.command(command));
      const rigs = await boundRigs(config, uplink, edges, closing.signal);
      if (!rigs) return;
      await fleet.bind(rigs);
      if (damaged) await journal.settleDamage();
      uplink.start();
      log({ level: 'info', code: 'agent-started', message: `The agent works for ${server}.` });
      await reportUntilClosed(fleet, edges, closing.signal);
    } finally {
      await fleet.close();
      await uplink.close();
      await stopSocket.close();
    }
  } finally {
    await journal.close();
  }
}

/** Readings grow old by themselves: they are told again every second, changes at once. */
async function reportUntilClosed(
  fleet: Fleet,
  { clock }: Pick<AgentEdges, 'clock'>,
  closing: AbortSignal,
): Promise<void> {
  while (!closing.aborted) {
    await pauseUntil(clock, REPORT_EVERY_MS, closing);
    fleet.report();
  }
}
