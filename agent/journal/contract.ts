import type { AgentEvent, EventBody } from '@/lib/protocol/events';

/** Events under one journal id, waiting to be stored by the server. */
export interface EventSource {
  readonly id: string;
  /** Up to this sequence events are durable, and may go up. */
  readonly lastSequence: number;
  /** Up to this sequence the server has said "stored". */
  readonly acknowledged: number;
  /** Durable events from `sequence` on; may give fewer than `limit` though more exist, none only when none exist. */
  eventsFrom(sequence: number, limit: number): Promise<AgentEvent[]>;
  /** Notes that the server has stored all up to this sequence. */
  acknowledge(through: number): Promise<void>;
}

export interface Journal<Note> extends EventSource {
  /**
   * Resolves with the event's sequence (from 1, without gaps) once it would outlast a power loss. Waits while the
   * disk has no room. @throws ZodError for a body the server would refuse, JournalError when it cannot be kept
   */
  appendEvent(body: EventBody, at: Date): Promise<number>;
  /** Resolves once durable, in order with the events. Notes stay on this computer. */
  appendNote(note: Note): Promise<void>;
  /** Calls back after events became durable. @returns the way to stop that */
  onAppend(listener: () => void): () => void;
  /** The disk bound is reached or the disk has no room: records are still taken, no run may be started. */
  readonly full: boolean;
  /** A segment was closed since the last snapshot note: one should be appended now. */
  readonly wantsSnapshot: boolean;
  /** Damaged journals before this one whose events are still to go up, oldest first. */
  readonly earlier: readonly EventSource[];
  /** To be called once the core has acted on the damage it was told at opening (held its runs). */
  settleDamage(): Promise<void>;
  close(): Promise<void>;
}
