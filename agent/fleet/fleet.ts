import type { AgentConfig } from '@/agent/config';
import type { Log } from '@/agent/log';
import { saveCachedRigs } from '@/agent/uplink/rigs-cache';
import type { Uplink } from '@/agent/uplink/uplink';
import type { Rig } from '@/agent/rig/rig';
import { EllwandError } from '@/lib/errors';
import type { Command } from '@/lib/protocol/commands';
import type { BoundRigs } from '@/lib/protocol/pairing';
import type { RigReport } from '@/lib/protocol/report';
import { watchPort } from './port-log';
import type { StartRig } from './start-rig';

export type BoundRig = BoundRigs['rigs'][number];

export interface FleetParts {
  config: Pick<AgentConfig, 'dataDir' | 'rigs'>;
  uplink: Pick<Uplink, 'answer' | 'fetchRigs' | 'report'>;
  /** The agent's wall time. */
  date: () => Date;
  startRig: StartRig;
  log: Log;
}

/** The rigs of this agent: those that the configuration names and the server has bound to it. */
export class Fleet {
  readonly #rigs = new Map<string, Rig>();
  readonly #names = new Map<string, string>();
  readonly #watches = new Map<string, (report: RigReport) => void>();

  constructor(private readonly parts: FleetParts) {}

  /** Starts what is not running yet and hands the others their numbers. */
  async bind({ rigs }: BoundRigs): Promise<void> {
    for (const rigPort of this.parts.config.rigs) {
      const { rig: wanted } = rigPort;
      const bound = rigs.find(({ rigId, name }) => rigId === wanted || name === wanted);
      if (!bound) {
        const message = 'The server has no such rig for this agent. Look at its name in the set-up.';
        this.parts.log({ level: 'error', rig: wanted, code: 'rig-not-bound', message });
        continue;
      }
      this.#names.set(bound.name, bound.rigId);
      this.#names.set(bound.rigId, bound.rigId);
      this.#names.set(wanted, bound.rigId);
      const running = this.#rigs.get(bound.rigId);
      if (running) running.rebind(bound.profile, bound.fence);
      else {
        const rig = await this.parts.startRig(bound, rigPort, () => this.report());
        this.#rigs.set(bound.rigId, rig);
        this.#watches.set(bound.rigId, watchPort(bound.name, this.parts.log));
      }
    }
    this.report();
  }

  report(): void {
    const reports = [...this.#rigs.values()].map((rig) => rig.report());
    for (const report of reports) this.#watches.get(report.rigId)?.(report);
    this.parts.uplink.report(reports);
  }

  /** What each rig would report now, under the name that the configuration gives it. */
  state(): { rig: string; report: RigReport | null }[] {
    return this.parts.config.rigs.map(({ rig }) => {
      const rigId = this.#names.get(rig);
      const running = rigId === undefined ? undefined : this.#rigs.get(rigId);
      return { rig, report: running?.report() ?? null };
    });
  }

  command(command: Command): void {
    const rig = this.#rigs.get(command.rigId);
    if (!rig) {
      const at = this.parts.date().toISOString();
      this.parts.uplink.answer(command.id, { outcome: 'refused', at, code: 'rig-not-bound' });
      return;
    }
    if (command.kind === 'reload-rigs') void this.#reload(command.id);
    else rig.command(command);
  }

  /** Stops one rig by its name or id, or all. @returns how many there were */
  stop(rig: string | null): number {
    const rigId = rig === null ? null : this.#names.get(rig);
    const stopped = [...this.#rigs.values()].filter((each) => rigId === null || each.rigId === rigId);
    for (const each of stopped) each.stop();
    return stopped.length;
  }

  async close(): Promise<void> {
    await Promise.all([...this.#rigs.values()].map((rig) => rig.close()));
  }

  async #reload(commandId: string): Promise<void> {
    try {
      const rigs = await this.parts.uplink.fetchRigs();
      await saveCachedRigs(this.parts.config.dataDir, rigs);
      await this.bind(rigs);
      this.parts.uplink.answer(commandId, { outcome: 'done', at: this.parts.date().toISOString() });
    } catch (error) {
      const code = error instanceof EllwandError ? error.code : 'unexpected';
      this.parts.uplink.answer(commandId, { outcome: 'refused', at: this.parts.date().toISOString(), code });
    }
  }
}
