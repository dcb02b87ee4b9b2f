const ROUND_TO_MS = 10 * 60_000;

/**
 * Writes moments as people of a time zone say them: `14:20`, with the day before it when that is not today. Rounded up
 * to ten minutes: estimates are no finer, and a sentence that changes every second is no use.
 */
export function speakTimeIn(timeZone: string, now: Date): (at: Date) => string {
  const time = new Intl.DateTimeFormat('en-GB', { timeZone, hour: '2-digit', minute: '2-digit' });
  const weekday = new Intl.DateTimeFormat('en-GB', { timeZone, weekday: 'long' });
  const day = new Intl.DateTimeFormat('en-GB', { timeZone, dateStyle: 'short' });
  return (at) => {
    const rounded = new Date(Math.ceil(at.getTime() / ROUND_TO_MS) * ROUND_TO_MS);
    const today = day.format(rounded) === day.format(now);
    return today ? time.format(rounded) : `${weekday.format(rounded)} ${time.format(rounded)}`;
  };
}
