/** Least first. */
export const LOG_LEVELS = ['debug', 'info', 'warning', 'error'] as const;
export type LogLevel = (typeof LOG_LEVELS)[number];

/** `journal`: lines of JSON, each with its priority in front as the system's journal takes it (sd-daemon(3)). */
export const LOG_FORMATS = ['auto', 'text', 'json', 'journal'] as const;
export type LogFormat = Exclude<(typeof LOG_FORMATS)[number], 'auto'>;

export interface LogEntry {
  level: LogLevel;
  /** The rig's name; left out when the agent as a whole is meant. */
  rig?: string;
  /** A word to search by; never changes with the wording. */
  code: string;
  message: string;
}

export type Log = (entry: LogEntry) => void;

export interface LogParts {
  format: LogFormat;
  /** What is less than this is left out. */
  level: LogLevel;
  date: () => Date;
  /** Takes one line with its end. */
  write: (line: string) => void;
}

/** Severities of syslog (RFC 5424, 6.2.1). */
const PRIORITY: Record<LogLevel, number> = { debug: 7, info: 6, warning: 4, error: 3 };

/** The agent's log: one entry, one line, whatever the message holds. */
export function createLog({ format, level, date, write }: LogParts): Log {
  const least = LOG_LEVELS.indexOf(level);
  return (entry) => {
    if (LOG_LEVELS.indexOf(entry.level) < least) return;
    write(`${lineOf(entry, format, date())}\n`);
  };
}

function lineOf({ level, rig, code, message }: LogEntry, format: LogFormat, at: Date): string {
  if (format === 'text') {
    const whose = rig === undefined ? '' : `${rig}: `;
    const loud = level === 'warning' || level === 'error' ? `${level.toUpperCase()} ` : '';
    return `${at.toISOString()} ${loud}${whose}${message} (${code})`.replaceAll(/[\r\n]+/g, ' ');
  }
  const json = JSON.stringify({ at: at.toISOString(), level, rig, code, message });
  return format === 'journal' ? `<${PRIORITY[level]}>${json}` : json;
}
