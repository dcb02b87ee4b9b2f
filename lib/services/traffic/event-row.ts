import type { AgentEvent } from '@/lib/protocol/events';

/** One event as a row for the storing statement: what it charges and counts stands in columns of its own. */
export interface EventRow {
  sequence: number;
  at: string;
  kind: string;
  rig_id: string | null;
  run_id: string | null;
  /** The piece that this event counts; null: it counts none. */
  counted: number | null;
  closings: number;
  trims: number;
  wire_mm: number;
  closed_at: string | null;
  body: AgentEvent['body'];
}

type Charges = Pick<EventRow, 'counted' | 'closings' | 'trims' | 'wire_mm' | 'closed_at'>;

const NO_CHARGES: Charges = { counted: null, closings: 0, trims: 0, wire_mm: 0, closed_at: null };

/**
 * What one event counts and charges. Only `piece-cut` counts, and a doubted piece that a person counted. A doubted cut
 * is charged when it is doubted: its feed was done and its jaws were told to close.
 */
export function chargesOf(body: AgentEvent['body'], at: string): Charges {
  switch (body.kind) {
    case 'piece-cut':
      return {
        counted: body.piece,
        closings: 1,
        trims: 0,
        wire_mm: body.wireMm,
        closed_at: body.jawsClosedAt,
      };
    case 'trim-cut':
      return { ...NO_CHARGES, closings: 1, trims: 1, wire_mm: body.wireMm };
    case 'piece-doubted':
      return { ...NO_CHARGES, closings: 1, wire_mm: body.wireMm };
    case 'piece-settled':
      return body.answer === 'count' ? { ...NO_CHARGES, counted: body.piece, closed_at: at } : NO_CHARGES;
    default:
      return NO_CHARGES;
  }
}

export function rowOf(event: AgentEvent): EventRow {
  const { sequence, at, body } = event;
  return {
    sequence,
    at,
    kind: body.kind,
    rig_id: 'rigId' in body ? body.rigId : null,
    run_id: 'runId' in body ? body.runId : null,
    ...chargesOf(body, at),
    body,
  };
}
