/** A state machine as a table: for each state, the states that may follow. */
export type Transitions<State extends string> = { readonly [S in State]: readonly State[] };

/** Whether a machine may step from one state to another. Staying is no step. */
export function mayStep<State extends string>(table: Transitions<State>, from: State, to: State): boolean {
  return table[from].includes(to);
}

/** Every allowed step of a machine as (from, to), in table order; the database keeps the same list. */
export function allSteps<State extends string>(table: Transitions<State>): { from: State; to: State }[] {
  const states = Object.keys(table) as State[];
  return states.flatMap((from) => table[from].map((to) => ({ from, to })));
}
