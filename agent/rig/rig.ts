import type { Clock } from '@/agent/clock';
import type { Reply, ReplyKind } from '@/agent/dialect/reply';
import type { OpenPort } from '@/agent/link/port';
import type { FindPort } from '@/agent/link/ports';
import type { ProgramStore } from '@/agent/programs/store';
import { reduce, type RigEvent } from '@/agent/runner/reduce';
import { reportOf, runnerState } from '@/agent/runner/report';
import type { RigState } from '@/agent/runner/state';
import type { Effect } from '@/agent/runner/turn';
import type { Uplink } from '@/agent/uplink/uplink';
import type { Profile } from '@/lib/program/profile';
import type { Command } from '@/lib/protocol/commands';
import type { Firmware, RigReport } from '@/lib/protocol/report';
import { fetchProgram } from './program';
import type { Recorder } from './recorder';
import { createSession, type Session } from './session';

/** How often the reducer is told the time, so that it can poll and let go. */
const TICK_MS = 250;

/** Replies that mean something outside of the answer that they are part of. */
const HEARD: readonly ReplyKind[] = ['refusal', 'action', 'other', 'error', 'halted', 'switch-hit'];

export interface RigParts {
  /** The state to begin with, from the journal. */
  state: RigState;
  findPort: FindPort;
  openPort: OpenPort;
  clock: Clock;
  /** Why this agent does not serve a firmware that it could speak to; null: it does. */
  objection: (firmware: Firmware) => string | null;
  random: () => number;
  /** A new challenge: 16 to 64 characters nobody can guess. */
  randomChallenge: () => string;
  /** Four digits for the display. */
  randomCode: () => string;
  recorder: Recorder;
  programs: Pick<ProgramStore, 'saveProgram' | 'dropProgram'>;
  uplink: Pick<Uplink, 'answer' | 'fetchProgram' | 'clockSkewMs'>;
  /** Called when a report would say something else than before. */
  onChange: () => void;
  /** The journal or the program store failed: nothing may be sent any more. */
  onFatal: (error: unknown) => void;
}

/** One rig: its port, its reducer, and the order in which its effects happen. */
export class Rig {
  #state: RigState;
  readonly #queue: RigEvent[] = [];
  #draining: Promise<void> = Promise.resolve();
  #busy = false;
  /** Resolves when the latest event is on disk; the journal keeps their order. */
  #written: Promise<void> = Promise.resolve();
  #calmTick: () => void = () => undefined;
  #closed = false;
  readonly #session: Session;

  constructor(private readonly parts: RigParts) {
    this.#state = parts.state;
    this.#session = createSession({
      findPort: parts.findPort,
      serial: () => this.#state.profile.serial,
      openPort: parts.openPort,
      clock: parts.clock,
      objection: parts.objection,
      random: parts.random,
      events: {
        opening: () => this.#dispatch({ type: 'opening' }),
        met: (firmware, bannerSeen, notice) => this.#dispatch({ type: 'met', firmware, bannerSeen, notice }),
        stranger: (reason) => this.#dispatch({ type: 'stranger', reason }),
        unreachable: (reason) => this.#dispatch({ type: 'unreachable', reason }),
        lost: (failure, reason) => this.#dispatch({ type: 'lost', failure, reason }),
        heard: (reply) => this.#heard(reply),
      },
    });
  }

  get rigId(): string {
    return this.#state.rigId;
  }

  /** @param journalDamaged whether the journal lost something that this rig's run may need */
  async start(journalDamaged: boolean): Promise<void> {
    this.#dispatch({ type: 'restored', journalDamaged });
    await this.#draining;
    this.#session.start();
    this.#tick();
  }

  report(): RigReport {
    return reportOf(this.#state);
  }

  command(command: Command): void {
    const { recorder, uplink, clock } = this.parts;
    if (command.kind === 'start-run' && recorder.full) {
      uplink.answer(command.id, { outcome: 'refused', at: clock.date().toISOString(), code: 'unexpected' });
      return;
    }
    this.#dispatch({
      type: 'command',
      command,
      skewMs: uplink.clockSkewMs,
      challenge: this.parts.randomChallenge(),
      code: this.parts.randomCode(),
    });
  }

  /** The stop at the rig's computer: no server, no network, no question. */
  stop(): void {
    this.#dispatch({ type: 'local-stop' });
  }

  rebind(profile: Profile, fence: number): void {
    this.#dispatch({ type: 'rebound', profile, fence });
  }

  /** Sends nothing more, waits for the journal, lets go of the port. */
  async close(): Promise<void> {
    this.#closed = true;
    this.#calmTick();
    await this.#draining;
    await Promise.allSettled([this.#written]);
    await this.#session.close();
  }

  #tick(): void {
    if (this.#closed) return;
    this.#calmTick = this.parts.clock.after(TICK_MS, () => {
      this.#dispatch({ type: 'tick' });
      this.#tick();
    });
  }

  #heard(reply: Reply): void {
    if (HEARD.includes(reply.kind)) this.#dispatch({ type: 'heard', reply });
  }

  #dispatch(event: WithoutTime<RigEvent>): void {
    if (this.#closed) return;
    this.#queue.push({ ...event, nowMs: this.parts.clock.date().getTime() });
    if (!this.#busy) this.#draining = this.#drain();
  }

  /**
   * Events one after the other, and of each all effects in their order: a note is on disk before its line goes out.
   * What the rig said is written while the next line goes out already: the rig remembers it, too, until it is.
   */
  async #drain(): Promise<void> {
    this.#busy = true;
    try {
      for (let event = this.#queue.shift(); event; event = this.#queue.shift()) {
        const before = this.#state;
        const { state, effects } = reduce(before, event);
        this.#state = state;
        for (const effect of lineFirst(effects)) {
          const done = this.#perform(effect);
          if (done) await done;
        }
        // What is reported is on disk; a failure is told by the event itself.
        if (changed(before, state)) this.#written.then(this.parts.onChange, () => undefined);
      }
    } catch (error) {
      this.#fail(error);
    } finally {
      this.#busy = false;
    }
  }

  #fail(error: unknown): void {
    if (this.#closed) return;
    this.#closed = true;
    this.parts.onFatal(error);
  }

  #perform(effect: Effect): Promise<void> | undefined {
    const { recorder, uplink, clock } = this.parts;
    switch (effect.do) {
      case 'event':
        this.#written = recorder.event(effect.body, clock.date());
        // Whoever waits for it hears of a failure; nobody may be waiting.
        this.#written.catch((error: unknown) => this.#fail(error));
        return undefined;
      case 'note':
        return recorder.note(effect.note);
      case 'drop':
        return this.#written.then(() => this.parts.programs.dropProgram(effect.runId));
      case 'send':
        this.#send(effect);
        return undefined;
      case 'interrupt':
        this.#session.conversation?.interrupt(effect.command);
        return undefined;
      case 'answer':
        return this.#written.then(() => uplink.answer(effect.commandId, effect.answer));
      case 'fetch':
        this.#fetch(effect.commandId, effect.runId);
        return undefined;
    }
  }

  #send({ command, expectedMs, needs }: Extract<Effect, { do: 'send' }>): void {
    const { conversation } = this.#session;
    // Lost meanwhile: the session has told so, and the event waits in the queue.
    if (!conversation || this.#closed) return;
    void conversation.ask(command, { expectedMs, needs }).then((answer) => {
      if (answer.outcome === 'failed') this.#session.fail(conversation, answer.failure);
      else if (conversation === this.#session.conversation) {
        this.#dispatch({ type: 'answered', sure: answer.outcome === 'ok', replies: answer.replies });
      }
    });
  }

  #fetch(commandId: string, runId: string): void {
    const { uplink, programs } = this.parts;
    fetchProgram(uplink, programs, this.rigId, runId).then(
      (fetched) => this.#dispatch({ type: 'fetched', commandId, runId, fetched }),
      (error: unknown) => this.parts.onFatal(error),
    );
  }
}

type WithoutTime<Event> = Event extends unknown ? Omit<Event, 'nowMs'> : never;

/** A line waits for notes alone; where there is none it goes out first, and what was learnt is written meanwhile. */
function lineFirst(effects: readonly Effect[]): readonly Effect[] {
  if (effects.some((effect) => effect.do === 'note')) return effects;
  const isLine = (effect: Effect) => effect.do === 'send' || effect.do === 'interrupt';
  return [...effects.filter(isLine), ...effects.filter((effect) => !isLine(effect))];
}

/** Whether the server has something to learn; pieces go up as events, and a newer reading waits a second. */
function changed(before: RigState, after: RigState): boolean {
  if (before === after) return false;
  const { run, signals } = after;
  return (
    before.port !== after.port ||
    before.halted !== after.halted ||
    before.challenge !== after.challenge ||
    before.fence !== after.fence ||
    before.displayShown !== after.displayShown ||
    (before.workHold === null) !== (after.workHold === null) ||
    before.run?.order.runId !== run?.order.runId ||
    before.run?.hold !== run?.hold ||
    runnerState(before.run) !== runnerState(run) ||
    before.signals.guard.reading !== signals.guard.reading ||
    before.signals.wire.reading !== signals.wire.reading ||
    before.signals.heater.reading !== signals.heater.reading
  );
}
