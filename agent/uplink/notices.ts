import type { ErrorCode } from '@/lib/errors';

/** What part of the talk with the server a notice is about. */
export type Topic = 'events' | 'earlier-events' | 'reports' | 'commands' | 'answers' | 'acknowledgement';

/** Something about the server link that a person may have to know. */
export interface Notice {
  topic: Topic;
  /** null: it works again. */
  code: ErrorCode | null;
  /** What to do, or what happens now. */
  text: string;
  details: Record<string, unknown>;
}

export type Say = (notice: Notice) => void;

const TEXTS: Partial<Record<ErrorCode, string>> = {
  'token-refused': 'The server does not know this agent’s token. Pair it again with a new code.',
  'protocol-unknown': 'The server speaks another version. Update the older of the two.',
  'service-away': 'The server does not answer. Everything is kept and sent when it is back.',
  'event-conflict':
    'STOPPED UPLOADING: the server holds other events under this journal’s numbers. Nothing is removed here. ' +
    'Find out whether this folder was copied or put back from a backup.',
  'journal-gap':
    'STOPPED UPLOADING: the server wants events that this computer no longer has. Nothing more is removed here.',
};

/** Tells each topic's state when it changes, not on every try. */
export class Teller {
  #told = new Map<Topic, ErrorCode | null>();

  constructor(private readonly say: Say) {}

  works(topic: Topic): void {
    if (!this.#told.get(topic)) return;
    this.#told.set(topic, null);
    this.say({ topic, code: null, text: 'This works again.', details: {} });
  }

  fails(topic: Topic, code: ErrorCode, details: Record<string, unknown> = {}): void {
    if (this.#told.get(topic) === code) return;
    this.#told.set(topic, code);
    this.say({ topic, code, text: TEXTS[code] ?? 'The server refused. It is tried again.', details });
  }

  /** Tells one happening, whatever was told before. */
  once(topic: Topic, code: ErrorCode, text: string, details: Record<string, unknown> = {}): void {
    this.say({ topic, code, text, details });
  }
}
