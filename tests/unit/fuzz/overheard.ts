import type { Dialect } from '@/agent/dialect/dialect';
import type { Reply, ReplyKind } from '@/agent/dialect/reply';
import { createConversation, type Answer } from '@/agent/link/conversation';
import { reduce, type RigEvent } from '@/agent/runner/reduce';
import type { RigState } from '@/agent/runner/state';
import type { Effect } from '@/agent/runner/turn';
import type { EventBody } from '@/lib/protocol/events';
import { bareProfile, drivenRig, RUN, type DrivenRig, type WithoutTime } from '@/tests/unit/agent/driven-rig';
import { HandClock, settle } from '@/tests/unit/agent/hand-clock';
import { TestPort } from '@/tests/unit/agent/test-port';

type Send = Extract<Effect, { do: 'send' }>;

/** A moment in a run: the reducer's state, and the line of the program that is in flight. */
export interface Moment {
  state: RigState;
  inFlight: Send;
}

const HEARD: readonly ReplyKind[] = ['refusal', 'action', 'other', 'error', 'halted', 'switch-hit'];
const THREE = { pieces: 3, lengthMm: 200 };

function momentOf(rig: DrivenRig): Moment | null {
  const last = rig.effects.findLast((effect) => effect.do === 'send');
  return rig.state.outstanding !== null && last?.do === 'send' ? { state: rig.state, inFlight: last } : null;
}

/** Every moment from here on at which a line is in flight and no more than two pieces are counted. */
function momentsFrom(rig: DrivenRig): Moment[] {
  const moments: Moment[] = [];
  for (;;) {
    const moment = momentOf(rig);
    if (!moment || rig.run.cut > 2) return moments;
    if (rig.run.registered) moments.push(moment);
    rig.answer();
  }
}

/** Moments of a run that goes on, that is being paused, and of one whose agent came back and asks where it stands. */
export function momentsOfARun(registerAxis: 'Y' | null): Moment[] {
  const profile = { ...bareProfile, registerAxis };
  const started = () => {
    const rig = drivenRig(THREE, profile);
    rig.start();
    return rig;
  };
  const paused = started();
  paused.driveTo(/^G1 E100/);
  paused.command({ kind: 'pause', ...paused.envelope(), runId: RUN });
  const stopped = started();
  stopped.driveTo(/^G1 Z5\.5/);
  stopped.answer();
  stopped.driveTo(/^G1 Z5\.5/);
  stopped.command({ kind: 'stop', ...stopped.envelope(), runId: RUN });
  const lives = [/^G1 E200/, /^G1 Z5\.5/, /^M114/, /^G92 Y?.*E0/].map((line) => {
    const rig = started();
    rig.driveTo(/^G1 E100/);
    rig.driveTo(line);
    const again = rig.reborn();
    again.meet();
    return again;
  });
  return [started(), paused, stopped, ...lives].flatMap(momentsFrom);
}

/** What was said on the line, in reads, with the time that passes after each. */
export type Noise = readonly (readonly [text: string, waitMs: number])[];

/** The agent's reducer and conversation at a line on which the test says what it likes. */
export class Overheard {
  readonly events: EventBody[] = [];
  /** Every byte that the agent got so far. */
  heard = '';
  /** Bytes that the agent had got when each event came. */
  readonly heardAt: number[] = [];
  readonly #clock = new HandClock();
  readonly #port = new TestPort();
  readonly #conversation;
  #state: RigState;
  #nowMs: number;

  constructor(moment: Moment, dialect: Dialect, nowMs: number) {
    this.#state = moment.state;
    this.#nowMs = nowMs;
    this.#conversation = createConversation(this.#port, this.#clock, (reply) => this.#hears(reply));
    this.#conversation.speak(dialect);
    this.#ask(moment.inFlight, 10);
  }

  async hear(noise: Noise): Promise<void> {
    for (const [text, waitMs] of noise) {
      this.heard += text;
      this.#port.say(text);
      this.#nowMs += waitMs;
      // Passing lets everything happen first that waits for nothing but its turn.
      await this.#clock.pass(waitMs);
    }
    await settle();
  }

  #hears(reply: Reply): void {
    if (HEARD.includes(reply.kind)) this.#happens({ type: 'heard', reply });
    if (reply.kind === 'start') this.#ends('reset');
    if (reply.kind === 'halted') this.#ends('halted');
  }

  #ends(failure: Extract<Answer, { outcome: 'failed' }>['failure']): void {
    this.#conversation.abandon(failure);
    this.#happens({ type: 'lost', failure, reason: failure });
  }

  #ask({ command, expectedMs, needs }: Send, line?: number): void {
    const asked = this.#conversation.ask(command, {
      expectedMs,
      needs,
      ...(line === undefined ? {} : { line }),
    });
    void asked.then((answer) => {
      if (answer.outcome !== 'failed') {
        this.#happens({ type: 'answered', sure: answer.outcome === 'ok', replies: answer.replies });
      } else if (this.#state.port === 'open')
        this.#happens({ type: 'lost', failure: answer.failure, reason: '' });
    });
  }

  #happens(event: WithoutTime<RigEvent>): void {
    const { state, effects } = reduce(this.#state, { ...event, nowMs: this.#nowMs });
    this.#state = state;
    for (const effect of effects) {
      if (effect.do === 'event') {
        this.events.push(effect.body);
        this.heardAt.push(this.heard.length);
      }
      if (effect.do === 'send') this.#ask(effect);
    }
  }
}
