import type { Reply, ReplyKind } from './reply';

/** What truly differs between the families that are spoken; everything else is the same for both. */
export interface Dialect {
  /** As the server is told it. */
  readonly name: string;
  /** The longest feed of one move that is carried out, E units. */
  readonly longestFeedUnits: number;
  /** Line numbers are the same when they differ by a multiple of this. */
  readonly numbersModulo: number;
  /** Whether an ok comes when a line was received, before it is carried out and answered. */
  readonly acksOnReceipt: boolean;
  /** One received line as a typed event. */
  read(text: string): Reply;
  /**
   * The lines that carry a command out so that the last one's ok proves it; none where the family needs nothing of
   * the kind. `needs`: the kind of reply that the command is asked for.
   */
  linesOf(command: string, needs: ReplyKind | null): readonly string[];
}

/** How a line is said and what its ok means. */
export interface Manner {
  /** With number and checksum. Without, nothing is ever sent again: nobody could tell a line that was taken. */
  readonly numbered: boolean;
  readonly numbersModulo: number;
  readonly acksOnReceipt: boolean;
}
