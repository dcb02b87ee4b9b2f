import type { RigDto, WaitingDto } from '@/lib/schemas/floor';
import type { Need } from './needs';

const NUMBERS = [
  'No',
  'One',
  'Two',
  'Three',
  'Four',
  'Five',
  'Six',
  'Seven',
  'Eight',
  'Nine',
  'Ten',
  'Eleven',
  'Twelve',
];

/** A count at the beginning of a sentence: words up to twelve, then digits. */
export function countWord(count: number): string {
  return NUMBERS[count] ?? String(count);
}

/** What the floor begins with: `urgent` is set in bold, `rest` follows. */
export interface FloorSentence {
  urgent: string;
  rest: string;
}

function cuttingPart(rigs: readonly RigDto[]): string {
  const cutting = rigs.filter((rig) => rig.state === 'cutting').length;
  if (cutting === 0) return 'None is cutting.';
  return `${countWord(cutting)} ${cutting === 1 ? 'is' : 'are'} cutting.`;
}

function waitingPart(waiting: WaitingDto, clock: (at: string) => string): string {
  if (waiting.lots === 0 || !waiting.next) return '';
  const due = waiting.next.dueAt ? ` is due ${clock(waiting.next.dueAt)} and` : '';
  const reason = waiting.next.reason === '' ? 'waits for a free rig' : `waits: ${waiting.next.reason}`;
  return ` ${waiting.next.batchName}${due} ${reason}`.replace(/\.?$/, '.');
}

/** The floor's first sentence. `clock` writes a moment as the workshop's wall clock would. */
export function floorSentence(
  rigs: readonly RigDto[],
  needs: readonly Need[],
  waiting: WaitingDto,
  clock: (at: string) => string,
): FloorSentence {
  if (rigs.length === 0) return { urgent: 'There are no rigs yet.', rest: 'An owner adds them in Set-up.' };
  const wanted = new Set(needs.map((need) => need.rigId)).size;
  const urgent =
    wanted === 0
      ? 'Nobody is needed.'
      : `${countWord(wanted)} ${wanted === 1 ? 'rig needs' : 'rigs need'} somebody.`;
  return { urgent, rest: `${cuttingPart(rigs)}${waitingPart(waiting, clock)}` };
}
