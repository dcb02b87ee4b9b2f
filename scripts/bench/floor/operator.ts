import { setTimeout as pause } from 'node:timers/promises';
import { EllwandError } from '@/lib/errors';
import type { RigDto, RigPageDto } from '@/lib/schemas/floor';
import type { CommandOutcome } from '@/lib/schemas/run';
import { readRigPage } from '@/lib/services/floor/read-rig-page';
import { acknowledgeNotes } from '@/lib/services/runs/acknowledge-notes';
import { clearTray } from '@/lib/services/runs/clear-tray';
import { goOn } from '@/lib/services/runs/go-on';
import { measurePieces } from '@/lib/services/runs/measure-pieces';
import { showCode } from '@/lib/services/runs/show-code';
import { startRun } from '@/lib/services/runs/start-run';
import type { ContextNow } from './actors';
import { operatorStep, type OperatorStep } from './operator-step';

const BETWEEN_LOOKS_MS = 300;
/** A report may be a moment behind a command, a reading too old: it is tried again, but not for ever. */
const REFUSALS_MOST = 30;
const CODE_LOOKS_MOST = 20;
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
        await this.#acknowledge(page, runId);
        const presenceCode = await this.#codeOf(page);
        const move = step === 'start' ? startRun : goOn;
        return move({ ctx: now(), input: { runId, presenceCode } });
      }
    }
  }

  async #acknowledge({ notes, acknowledged }: RigPageDto, runId: string): Promise<void> {
    if (acknowledged || !notes) return;
    const input = { runId, notesVersion: notes.version, full: true };
    await acknowledgeNotes({ ctx: this.contextNow(), input });
  }

  /** Has the code shown and reads it off the display; null where none is fitted. */
  async #codeOf({ rig }: RigPageDto): Promise<string | null> {
    if (!rig.fitted?.display) return null;
    const before = rig.virtualDisplay;
    const shown = await showCode({ ctx: this.contextNow(), input: { rigId: rig.id } });
    if (shown.outcome !== 'done') throw new EllwandError('presence-missing');
    for (let look = 0; look < CODE_LOOKS_MOST; look += 1) {
      const { virtualDisplay } = (await this.#read(rig.id)).rig;
      const code = /^CODE (\d+)$/.exec(virtualDisplay ?? '')?.[1];
      if (code !== undefined && virtualDisplay !== before) return code;
      await pause(BETWEEN_LOOKS_MS / 3);
    }
    throw new EllwandError('presence-missing');
  }
}
