/** One seed for all, so that `npm test` is the same each time; a failure prints it beside the smallest case. */
export const SEED = 20261201;
