import type { ErrorCode } from '@/lib/errors';
import type { CommandAnswer } from '@/lib/protocol/commands';
import type { EventBody } from '@/lib/protocol/events';
import type { ReplyKind } from '@/agent/dialect/reply';
import type { JournalNote } from './notes';
import type { RigState, Run } from './state';

/** What the reducer wants done, in this order; a journal entry is on disk before the next effect begins. */
export type Effect =
  | { do: 'event'; body: EventBody }
  | { do: 'note'; note: JournalNote }
  | { do: 'send'; command: string; expectedMs: number; needs: ReplyKind | null }
  /** Unnumbered and at once, whatever is in flight. */
  | { do: 'interrupt'; command: string }
  | { do: 'answer'; commandId: string; answer: CommandAnswer }
  | { do: 'fetch'; commandId: string; runId: string }
  | { do: 'drop'; runId: string };

/** One step of the reducer while it is made: the state so far and what is to be done. */
export class Turn {
  readonly effects: Effect[] = [];

  constructor(
    public state: RigState,
    readonly nowMs: number,
  ) {}

  set(change: Partial<RigState>): void {
    this.state = { ...this.state, ...change };
  }

  /** Changes the run; there must be one. */
  setRun(change: Partial<Run>): void {
    const { run } = this.state;
    if (run) this.set({ run: { ...run, ...change } });
  }

  get at(): string {
    return new Date(this.nowMs).toISOString();
  }

  event(body: EventBody): void {
    this.effects.push({ do: 'event', body });
  }

  note(note: JournalNote): void {
    this.effects.push({ do: 'note', note });
  }

  done(commandId: string): void {
    this.effects.push({ do: 'answer', commandId, answer: { outcome: 'done', at: this.at } });
  }

  refuse(commandId: string, code: ErrorCode): void {
    this.effects.push({ do: 'answer', commandId, answer: { outcome: 'refused', at: this.at, code } });
  }
}
