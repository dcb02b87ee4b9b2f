import { parseArgs } from 'node:util';

/** How long this bench is to measure, from `--minutes N`; `byDefault` when not said. @throws Error for anything else */
export function readMinutes(byDefault: number): number {
  const { values } = parseArgs({ options: { minutes: { type: 'string' } } });
  if (values.minutes === undefined) return byDefault;
  const minutes = Number(values.minutes);
  if (!(minutes > 0 && minutes <= 600))
    throw new Error(`--minutes ${values.minutes}: give a number up to 600`);
  return minutes;
}
