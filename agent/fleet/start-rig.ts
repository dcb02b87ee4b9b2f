import type { AgentConfig } from '@/agent/config';
import type { AgentEdges } from '@/agent/edges';
import { portFinder, type RigPort } from '@/agent/link/ports';
import type { ProgramStore } from '@/agent/programs/store';
import { loadHeldProgram } from '@/agent/rig/held-program';
import type { Recorder } from '@/agent/rig/recorder';
import { Rig } from '@/agent/rig/rig';
import { restoreRig } from '@/agent/runner/restore';
import type { Uplink } from '@/agent/uplink/uplink';
import type { BoundRig } from './fleet';
import { objectionAt } from './objection';
import { loggedRecorder } from './rig-log';

interface Parts {
  config: Pick<AgentConfig, 'rigs' | 'clockSpeed'>;
  edges: AgentEdges;
  recorder: Recorder;
  programs: ProgramStore;
  uplink: Uplink;
  /** The journal lost something that a run may need. */
  damaged: boolean;
  /** Aborted when no record can be kept any more. */
  closing: AbortController;
}

export type StartRig = (bound: BoundRig, wanted: RigPort, onChange: () => void) => Promise<Rig>;

/** Makes a rig as the journal remembers it, and starts it at the port that is meant for it. */
export function rigStarter(parts: Parts): StartRig {
  const { config, edges, programs, uplink, closing } = parts;
  const { clock, log } = edges;
  const onFatal = (cause: unknown) => {
    const message = `The agent stops: it can keep no record any more. ${wordsOf(cause)}`;
    log({ level: 'error', code: 'no-record', message });
    process.exitCode = 1;
    closing.abort();
  };
  return async ({ rigId, name, profile, fence }, wanted, onChange) => {
    const recorder = loggedRecorder(parts.recorder, log, name);
    const memory = recorder.memoryOf(rigId);
    const held = await loadHeldProgram(memory, rigId, programs, uplink);
    if (memory?.run && !held) {
      const message = 'The program of its run is gone. Count its tray by hand.';
      log({ level: 'error', rig: name, code: 'program-gone', message });
    }
    const nowMs = clock.date().getTime();
    const challenge = edges.randomChallenge();
    const rig = new Rig({
      ...edges,
      state: restoreRig({ rigId, profile, fence, challenge, nowMs, memory, held }),
      findPort: portFinder(wanted, config.rigs, edges.listPorts),
      objection: objectionAt(config.clockSpeed),
      recorder,
      programs,
      uplink,
      onChange,
      onFatal,
    });
    await rig.start(parts.damaged);
    return rig;
  };
}

function wordsOf(cause: unknown): string {
  return cause instanceof Error ? cause.message : String(cause);
}
