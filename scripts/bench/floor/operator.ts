import { setTimeout as pause } from 'node:timers/promises';
import { EllwandError } from '@/lib/errors';
import type { RigDto, RigPageDto } from '@/lib/schemas/floor';
import type { CommandOutcome } from '@/lib/schemas/run';
import { readRigPage } from '@/lib/services/floor/read-rig-page';
import { clearTray } from '@/lib/services/runs/clear-tray';
import { goOn } from '@/lib/services/runs/go-on';
import { measurePieces } from '@/lib/services/runs/measure-pieces';
import { startRun } from '@/lib/services/runs/start-run';
import { acknowledge } from '@/scripts/hands/acknowledge';
import type { ContextNow } from '@/scripts/hands/actors';
import { readPresenceCode } from '@/scripts/hands/presence-code';
import { operatorStep, type OperatorStep } from './operator-step';

const BETWEEN_LOOKS_MS = 300;
/** A report may be a moment behind a command, a reading too old: it is tried again, but not for ever. */
const REFUSALS_MOST = 30;
/** What the virtual rigs feed too much is within the lines' tolerance. */
const MEASURED_EXCESS_MM = 0.5;

/** Keeps rigs cutting as an operator would, by the services behind the buttons. */
export class Operator {
  readonly #busy = new Set<string>();

  constructor(
    private readonly contextNow: ContextNow,
    private readonly onFailed: (error: unknown) => void,
  ) {}

  /** Looks at a rig and does what it needs, unless that is being done. Returns at once. */
  see(rig: RigDto): void {
    if (this.#busy.has(rig.id)) return;
    this.#busy.add(rig.id);
    this.#attend(rig)
      .catch(this.onFailed)
      .finally(() => this.#busy.delete(rig.id));
  }

  async #attend(seen: RigDto): Promise<void> {
    let step = operatorStep(seen);
    for (let refusals = 0; step;) {
      const page = await this.#read(seen.id);
      step = operatorStep(page.rig);
      if (!step) return;
      const refusal = await this.#refusalOf(() => this.#do(step ?? 'start', page));
      if (refusal !== null && (refusals += 1) > REFUSALS_MOST) {
        throw new Error(`${seen.name} takes no ${step}: ${refusal}`);
      }
      await pause(BETWEEN_LOOKS_MS);
    }
  }

  #read(rigId: string): Promise<RigPageDto> {
    return readRigPage({ ctx: this.contextNow(), input: { rigId } });
  }

  async #refusalOf(deed: () => Promise<CommandOutcome | null>): Promise<string | null> {
    try {
      const outcome = await deed();
      return outcome === null || outcome.outcome === 'done' ? null : (outcome.code ?? outcome.outcome);
    } catch (error) {
      if (error instanceof EllwandError) return error.code;
      throw error;
    }
  }

  async #do(step: OperatorStep, page: RigPageDto): Promise<CommandOutcome | null> {
    const { run } = page.rig;
    if (!run) return null;
    const runId = run.id;
    const now = this.contextNow;
    switch (step) {
      case 'measure': {
        const lengthMm = run.lengthMm + MEASURED_EXCESS_MM;
        const lengths = run.piecesToMeasure.map((piece) => ({ piece, lengthMm }));
        await measurePieces({ ctx: now(), input: { runId, lengths } });
        return null;
      }
      case 'clear-tray':
        await clearTray({ ctx: now(), input: { runId, scrapped: 0, sampled: 0 } });
        return null;
      case 'start':
      case 'go-on': {
        await acknowledge(now, page, runId);
        const presenceCode = await readPresenceCode(now, page.rig);
        const move = step === 'start' ? startRun : goOn;
        return move({ ctx: now(), input: { runId, presenceCode } });
      }
    }
  }
}
