import type { AgentConfig } from '@/agent/config';
import { saveCachedRigs } from '@/agent/uplink/rigs-cache';
import type { Uplink } from '@/agent/uplink/uplink';
import type { Rig } from '@/agent/rig/rig';
import { EllwandError } from '@/lib/errors';
import type { Command } from '@/lib/protocol/commands';
import type { BoundRigs } from '@/lib/protocol/pairing';

export type BoundRig = BoundRigs['rigs'][number];

export interface FleetParts {
  config: Pick<AgentConfig, 'dataDir' | 'rigs'>;
  uplink: Pick<Uplink, 'answer' | 'fetchRigs' | 'report'>;
  /** The agent's wall time. */
  date: () => Date;
  /** Makes and starts a rig that is bound to this agent and has a port. */
  startRig: (bound: BoundRig, port: string) => Promise<Rig>;
  /** Told what a person at the computer may have to know. */
  say: (text: string) => void;
}

/** The rigs of this agent: those that the configuration names and the server has bound to it. */
export class Fleet {
  readonly #rigs = new Map<string, Rig>();
  readonly #names = new Map<string, string>();

  constructor(private readonly parts: FleetParts) {}

  /** Starts what is not running yet and hands the others their numbers. */
  async bind({ rigs }: BoundRigs): Promise<void> {
    for (const { rig: wanted, port } of this.parts.config.rigs) {
      const bound = rigs.find(({ rigId, name }) => rigId === wanted || name === wanted);
      if (!bound) {
        this.parts.say(`The server has no rig "${wanted}" for this agent. Look at its name in the set-up.`);
        continue;
      }
      this.#names.set(bound.name, bound.rigId);
      this.#names.set(bound.rigId, bound.rigId);
      this.#names.set(wanted, bound.rigId);
      const running = this.#rigs.get(bound.rigId);
      if (running) running.rebind(bound.profile, bound.fence);
      else this.#rigs.set(bound.rigId, await this.parts.startRig(bound, port));
    }
    this.report();
  }

  report(): void {
    this.parts.uplink.report([...this.#rigs.values()].map((rig) => rig.report()));
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
