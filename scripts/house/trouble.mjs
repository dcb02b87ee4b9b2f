/** Something the person at the keyboard can act on: printed as it is, without a stack. */
export class Trouble extends Error {
  /** @param {string} message what happened and what to do @param {ErrorOptions} [options] */
  constructor(message, options) {
    super(message, options);
    this.name = 'Trouble';
  }
}

/**
 * Prints an error as a person should see it: a Trouble by its words, anything else with its stack.
 * @param {unknown} error
 */
export function printTrouble(error) {
  if (error instanceof Trouble) console.error(`\n${error.message}`);
  else console.error(error);
}
