import type { LineFault } from './segment-scan';

/** One thing that is not as it was written. */
export interface Damage {
  /** `events-missing`: sequence numbers are left out. `end-missing`: the server has more than is left here. */
  kind: LineFault | 'head-wrong' | 'segment-missing' | 'events-missing' | 'end-missing';
  /** The file or folder to look at; nothing in it is changed or removed. */
  path: string;
  /** The byte at which it begins; 0 when the whole file is meant. */
  offset: number;
}
