import type { Manner } from '@/agent/dialect/dialect';
import type { Reply, ReplyKind } from '@/agent/dialect/reply';

/** Whether two line numbers are the same in this family. */
export function isSameNumber(a: number, b: number, { numbersModulo }: Manner): boolean {
  return (a - b) % numbersModulo === 0;
}

/** Whether this reply is the answer that a line needs; `M105` has it on its ok. */
export function proves(reply: Reply, needs: ReplyKind): boolean {
  return (
    reply.kind === needs || (needs === 'temperature' && reply.kind === 'ok' && reply.temperature !== null)
  );
}

/** The last line that the firmware has, by the last error among these replies; null when none tells. */
export function witnessedLine(replies: readonly Reply[]): number | null {
  const told = replies.findLast((reply) => reply.kind === 'error' && reply.lastLine !== null);
  return told?.kind === 'error' ? told.lastLine : null;
}
