/** A lot that waits. `wasOnRig`: it has a history and cannot be erased, only withdrawn with no pieces. */
export interface WaitingLot {
  id: string;
  number: number;
  pieces: number;
  wasOnRig: boolean;
}

export interface LotChanges {
  resize: { id: string; pieces: number }[];
  /** Sizes of lots to make beside those there are. */
  add: number[];
  erase: string[];
  withdraw: string[];
}

/** What to do with a line's waiting lots so that they have exactly `sizes`, keeping as many of them as can be. */
export function adjustLots(waiting: readonly WaitingLot[], sizes: readonly number[]): LotChanges {
  const inTurn = waiting.toSorted((a, b) => a.number - b.number);
  const spare = inTurn.slice(sizes.length);
  return {
    resize: inTurn.flatMap(({ id, pieces }, index) => {
      const size = sizes[index];
      return size === undefined || size === pieces ? [] : [{ id, pieces: size }];
    }),
    add: sizes.slice(inTurn.length),
    erase: spare.filter(({ wasOnRig }) => !wasOnRig).map(({ id }) => id),
    withdraw: spare.filter(({ wasOnRig }) => wasOnRig).map(({ id }) => id),
  };
}
