import type { KeptSegment } from './generation';

/** Which segments are on disk, how much room they take, and which are no longer needed. */
export class SegmentShelf {
  #segments: KeptSegment[];

  constructor(
    segments: readonly KeptSegment[],
    private snapshotSegment: number,
  ) {
    this.#segments = segments.map((segment) => ({ ...segment }));
  }

  get sizeBytes(): number {
    return this.#segments.reduce((sum, segment) => sum + segment.sizeBytes, 0);
  }

  get wantsSnapshot(): boolean {
    const newest = this.#segments.at(-1);
    return newest !== undefined && this.#segments.length > 1 && this.snapshotSegment < newest.number;
  }

  add(segment: KeptSegment): void {
    this.#segments.push(segment);
  }

  /** A line was added to the newest segment. */
  grow(bytes: number, lastSequence: number, snapshot: boolean): void {
    const newest = this.#segments.at(-1);
    if (!newest) return;
    newest.sizeBytes += bytes;
    newest.lastSequence = lastSequence;
    if (snapshot) this.snapshotSegment = newest.number;
  }

  /** Takes off those before the last snapshot's segment whose events are all stored by the server, oldest first. */
  takeRemovable(acknowledged: number): KeptSegment[] {
    const keep = this.#segments.findIndex(
      (segment) => segment.number >= this.snapshotSegment || segment.lastSequence > acknowledged,
    );
    return keep > 0 ? this.#segments.splice(0, keep) : [];
  }
}
