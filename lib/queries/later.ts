interface Told {
  /** When it was so, by the server's clock; ISO, always in UTC. */
  at: string;
}

/**
 * The later of what is known and what was just told. An answer that was asked for before a live message came can arrive
 * after it; put in its place, a count would go back.
 */
export function later<T extends Told>(known: T | undefined, told: T): T {
  return known && known.at > told.at ? known : told;
}
