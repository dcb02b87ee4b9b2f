/** A moment on the workshop's wall clock: `14:05`, with the day before it when it is not today. */
export function wallClock(at: string, timeZone: string, nowMs: number): string {
  const moment = new Date(at);
  const day = new Intl.DateTimeFormat('en-GB', {
    timeZone,
    day: 'numeric',
    month: 'short',
    weekday: 'short',
  });
  const time = new Intl.DateTimeFormat('en-GB', { timeZone, hour: '2-digit', minute: '2-digit' }).format(
    moment,
  );
  return day.format(moment) === day.format(new Date(nowMs)) ? time : `${day.format(moment)}, ${time}`;
}

/** How long ago, in the largest fitting unit: `3 s`, `4 min`, `2 h`, `3 days`. */
export function ageWords(agoMs: number): string {
  const seconds = Math.max(0, Math.round(agoMs / 1000));
  if (seconds < 90) return `${seconds} s`;
  if (seconds < 90 * 60) return `${Math.round(seconds / 60)} min`;
  if (seconds < 48 * 3600) return `${Math.round(seconds / 3600)} h`;
  return `${Math.round(seconds / 86_400)} days`;
}

/** A moment with its date, for paper: `1 Dec 2026, 14:05`. */
export function datedClock(at: string, timeZone: string): string {
  const format = {
    timeZone,
    day: 'numeric',
    month: 'short',
    year: 'numeric',
    hour: '2-digit',
    minute: '2-digit',
  } as const;
  return new Intl.DateTimeFormat('en-GB', format).format(new Date(at));
}
