const WALL_TIME = /^(\d{4})-(\d{2})-(\d{2})T(\d{2}):(\d{2})$/;

function partsIn(at: Date, timeZone: string): string {
  // Swedish writes dates as a date-time field wants them.
  const format = new Intl.DateTimeFormat('sv-SE', { timeZone, dateStyle: 'short', timeStyle: 'short' });
  return format.format(at).replace(' ', 'T');
}

/** A moment on the clock of a time zone, as a date-time field shows it: `2026-12-01T14:05`. */
export function wallTimeOf(at: string, timeZone: string): string {
  return partsIn(new Date(at), timeZone);
}

/**
 * The moment at which the clocks of a time zone show `text` (as of a date-time field), in ISO; null when it is no time.
 * A time that comes twice, when clocks go back, is the first of the two; one that is left out is an hour later.
 */
export function momentOfWallTime(text: string, timeZone: string): string | null {
  const match = WALL_TIME.exec(text);
  if (!match) return null;
  const [, ...digits] = match;
  const [year = 0, month = 0, day = 0, hour = 0, minute = 0] = digits.map(Number);
  const asUtcMs = Date.UTC(year, month - 1, day, hour, minute);
  if (Number.isNaN(asUtcMs) || new Date(asUtcMs).toISOString().slice(0, 16) !== text) return null;
  // Zones lie within a day of UTC: of the offsets just before and after, the right one gives the text back.
  const guesses = [-1, 1].map((days) => {
    const nearMs = asUtcMs + days * 86_400_000;
    const shown = Date.parse(`${partsIn(new Date(nearMs), timeZone)}Z`);
    return asUtcMs - (shown - Math.floor(nearMs / 60_000) * 60_000);
  });
  const fitting = guesses.filter((ms) => partsIn(new Date(ms), timeZone) === text);
  const ms = fitting.length > 0 ? Math.min(...fitting) : Math.max(...guesses);
  return new Date(ms).toISOString();
}
