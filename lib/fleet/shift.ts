/** Milliseconds that local time is ahead of UTC in `timeZone` at `moment`. */
function offsetMs(moment: number, timeZone: string): number {
  const parts = new Intl.DateTimeFormat('en-GB', {
    timeZone,
    hourCycle: 'h23',
    year: 'numeric',
    month: 'numeric',
    day: 'numeric',
    hour: 'numeric',
    minute: 'numeric',
    second: 'numeric',
  }).formatToParts(moment);
  const part = (type: Intl.DateTimeFormatPartTypes) =>
    Number(parts.find((candidate) => candidate.type === type)?.value);
  const local = Date.UTC(
    part('year'),
    part('month') - 1,
    part('day'),
    part('hour'),
    part('minute'),
    part('second'),
  );
  return local - (moment - (moment % 1000));
}

/**
 * The moment when local clocks show `wallMs` (local time written as if it were UTC). Of a time shown twice the
 * first; of a time that is left out, the moment the clocks are put on.
 */
function momentOfWall(wallMs: number, timeZone: string): number {
  const before = wallMs - offsetMs(wallMs - 24 * 3_600_000, timeZone);
  if (before + offsetMs(before, timeZone) === wallMs) return before;
  const after = wallMs - offsetMs(wallMs + 24 * 3_600_000, timeZone);
  if (after + offsetMs(after, timeZone) === wallMs) return after;
  return changeBetween(after, before, timeZone);
}

/** The millisecond in (from, to] from which the offset of `to` holds; halving, as the offset changes once. */
function changeBetween(from: number, to: number, timeZone: string): number {
  const wanted = offsetMs(to, timeZone);
  let early = from;
  let late = to;
  while (late - early > 1) {
    const middle = Math.floor((early + late) / 2);
    if (offsetMs(middle, timeZone) === wanted) late = middle;
    else early = middle;
  }
  return late;
}

/**
 * When the shift that runs at `now` began. `shiftStarts` are local times `HH:MM` of every day, at least one; before
 * the day's first start the last shift of the day before still runs. Knows the days on which clocks change.
 */
export function shiftBeganAt(now: Date, shiftStarts: readonly string[], timeZone: string): Date {
  const moment = now.getTime();
  const wall = moment + offsetMs(moment, timeZone);
  const midnight = Math.floor(wall / 86_400_000) * 86_400_000;
  const starts = [-1, 0]
    .flatMap((day) => shiftStarts.map((start) => midnight + day * 86_400_000 + minutesOf(start) * 60_000))
    .map((wallMs) => momentOfWall(wallMs, timeZone))
    .filter((began) => began <= moment);
  return new Date(Math.max(...starts));
}

function minutesOf(start: string): number {
  const [hours, minutes] = start.split(':').map(Number);
  return (hours ?? 0) * 60 + (minutes ?? 0);
}
