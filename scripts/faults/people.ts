import { setTimeout as pause } from 'node:timers/promises';
import { EllwandError } from '@/lib/errors';
import type { HoldReason, RunState } from '@/lib/fleet/run';
import type { RigPageDto } from '@/lib/schemas/floor';
import type { CommandOutcome } from '@/lib/schemas/run';
import { readRigPage } from '@/lib/services/floor/read-rig-page';
import { beginWorkHold } from '@/lib/services/runs/begin-work-hold';
import { clearTray } from '@/lib/services/runs/clear-tray';
import { endWorkHold } from '@/lib/services/runs/end-work-hold';
import { goOn } from '@/lib/services/runs/go-on';
import { holdRun } from '@/lib/services/runs/hold-run';
import { measurePieces } from '@/lib/services/runs/measure-pieces';
import { pauseRun } from '@/lib/services/runs/pause-run';
import { settlePiece } from '@/lib/services/runs/settle-piece';
import { startRun } from '@/lib/services/runs/start-run';
import { stopRun } from '@/lib/services/runs/stop-run';
import { acknowledge } from '@/scripts/hands/acknowledge';
import type { ContextNow } from '@/scripts/hands/actors';
import { readPresenceCode } from '@/scripts/hands/presence-code';
import type { RigFault } from './fault';
import type { Span } from './judge';
import type { Stand } from './stand';
import type { Order } from './truth';
import { closingsOf, gaveAPiece, wholePieces } from './truth';

/** What a schedule has a person do. */
export type Deed = Extract<RigFault, { kind: 'pause' | 'stop' | 'misfeed' | 'work-hold' }>;
type WorkHold = Extract<Deed, { kind: 'work-hold' }>;

const BETWEEN_LOOKS_MS = 100;
const STANDSTILL_MOST_MS = 4_000;

/** What a rig's row shows from afar. */
export interface Glance {
  state: RunState | null;
  hold: HoldReason | null;
  cut: number;
  programHeld: boolean;
  workHold: boolean;
}

function needsSomebody({ state, programHeld, workHold }: Glance): boolean {
  if (workHold || (state === 'prepared' && programHeld)) return true;
  return state === 'paused' || state === 'held' || state === 'ended';
}

interface PersonParts {
  glance: () => Promise<Glance>;
  stand: Stand;
  now: ContextNow;
  /** Of a run as the server has it. */
  orderOf: (runId: string) => Promise<Order>;
  trace: (text: string) => void;
}

/**
 * One person at one rig, by the services behind the buttons: starts, measures, answers holds by looking at the tray,
 * clears it, and does what the schedule says. Whatever fails is tried again at the next look.
 */
export class Person {
  readonly permits: Span[] = [];
  readonly workHolds: Span[] = [];
  readonly #deeds: Deed[] = [];
  #closed = false;

  constructor(private readonly parts: PersonParts) {}

  will(deed: Deed): void {
    this.#deeds.push(deed);
  }

  /** Looks after the rig until `close`. */
  async attend(): Promise<void> {
    let last = '';
    while (!this.#closed) {
      try {
        const glance = await this.parts.glance();
        const seen = JSON.stringify(glance);
        if (seen !== last) this.parts.trace(seen);
        last = seen;
        const deed = this.#deeds.shift();
        if (deed) await this.#do(deed, await this.#look());
        else if (needsSomebody(glance)) await this.#serve(await this.#look());
      } catch (error) {
        const code = error instanceof EllwandError ? error.code : String(error).slice(0, 120);
        if (code !== last) this.parts.trace(`person: ${code}`);
        last = code;
      }
      await pause(BETWEEN_LOOKS_MS);
    }
  }

  close(): void {
    this.#closed = true;
  }

  #look(): Promise<RigPageDto> {
    return readRigPage({ ctx: this.parts.now(), input: { rigId: this.parts.stand.rigId } });
  }

  #note(what: string, outcome?: CommandOutcome): void {
    this.parts.trace(`person: ${what}${outcome ? ` ${outcome.outcome} ${outcome.code ?? ''}` : ''}`);
  }

  async #serve(page: RigPageDto): Promise<void> {
    const { run } = page.rig;
    const { now } = this.parts;
    if (page.rig.workHold) return this.#endWorkHold();
    if (!run) return;
    const runId = run.id;
    if (run.state === 'prepared' && run.programHeld) return this.#move('start', page, runId);
    if (run.state === 'paused') return this.#move('go-on', page, runId);
    if (run.state === 'ended') return this.#clear(run);
    if (run.state !== 'held') return;
    if (run.doubtPiece !== null) {
      const answer = await this.#lookAt(runId, run.doubtPiece);
      this.#note(answer, await settlePiece({ ctx: now(), input: { runId, answer } }));
    } else if (run.holdReason === 'journal-damaged') {
      this.#note('stop', await stopRun({ ctx: now(), input: { runId } }));
    } else if (run.piecesToMeasure.length > 0) {
      const lengths = run.piecesToMeasure.map((piece) => ({ piece, lengthMm: run.lengthMm }));
      await measurePieces({ ctx: now(), input: { runId, lengths } });
    } else await this.#move('go-on', page, runId);
  }

  async #move(step: 'start' | 'go-on', page: RigPageDto, runId: string): Promise<void> {
    const { now } = this.parts;
    await acknowledge(now, page, runId);
    const presenceCode = await readPresenceCode(now, page.rig);
    // The command may carry though its answer is lost: what it permits begins here.
    this.permits.push({ fromMs: Date.now(), untilMs: Infinity });
    const move = step === 'start' ? startRun : goOn;
    this.#note(step, await move({ ctx: now(), input: { runId, presenceCode } }));
  }

  /** The doubted piece is counted when it lies in the tray as it should; else discarded. */
  async #lookAt(runId: string, piece: number): Promise<'count' | 'discard'> {
    const order = await this.parts.orderOf(runId);
    const closings = closingsOf(this.parts.stand.tally, order).get(piece) ?? [];
    const last = closings.at(-1);
    return last && gaveAPiece(last, order) ? 'count' : 'discard';
  }

  async #clear({ id: runId, cut }: NonNullable<RigPageDto['rig']['run']>): Promise<void> {
    const whole = wholePieces(this.parts.stand.tally, await this.parts.orderOf(runId), cut);
    await clearTray({ ctx: this.parts.now(), input: { runId, scrapped: cut - whole, sampled: 0 } });
    const untilMs = Date.now();
    for (const permit of this.permits) permit.untilMs = Math.min(permit.untilMs, untilMs);
    this.#note(`clears the tray: ${whole} of ${cut}`);
  }

  async #do(deed: Deed, { rig: { run } }: RigPageDto): Promise<void> {
    const { now } = this.parts;
    if (deed.kind === 'work-hold') return this.#workOnIt(deed);
    if (!run) return;
    const input = { runId: run.id };
    if (deed.kind === 'pause') this.#note('pause', await pauseRun({ ctx: now(), input }));
    else if (deed.kind === 'stop') this.#note('stop', await stopRun({ ctx: now(), input }));
    else this.#note('misfeed', await holdRun({ ctx: now(), input: { ...input, cause: deed.cause } }));
  }

  async #workOnIt({ forMs, pull }: WorkHold): Promise<void> {
    const { now, stand } = this.parts;
    const begun = await beginWorkHold({ ctx: now(), input: { rigId: stand.rigId, reason: 'blade' } });
    this.#note('begins work', begun);
    const giveUpMs = Date.now() + STANDSTILL_MOST_MS;
    let standsStill = false;
    while (!standsStill && Date.now() < giveUpMs && !this.#closed) {
      await pause(BETWEEN_LOOKS_MS);
      standsStill = Boolean((await this.#look().catch(() => null))?.rig.workHold?.standstillAt);
    }
    if (!standsStill) return;
    const hold: Span = { fromMs: Date.now(), untilMs: Infinity };
    this.workHolds.push(hold);
    this.parts.trace('person: works at the jaws');
    if (pull === 'cable') await stand.control({ do: 'usb', plugged: false });
    if (pull === 'motors') await stand.control({ do: 'motor-power', on: false });
    await pause(forMs);
    if (pull === 'cable') await stand.control({ do: 'usb', plugged: true });
    if (pull === 'motors') await stand.control({ do: 'motor-power', on: true });
  }

  async #endWorkHold(): Promise<void> {
    const untilMs = Date.now();
    for (const hold of this.workHolds) hold.untilMs = Math.min(hold.untilMs, untilMs);
    const { now, stand } = this.parts;
    this.#note('ends work', await endWorkHold({ ctx: now(), input: { rigId: stand.rigId } }));
  }
}
