/** What can go wrong with the journal itself; each needs another answer from a person. */
export type JournalErrorCode =
  /** Another process works in this folder. */
  | 'journal-locked'
  /** It was closed before the record was on disk. */
  | 'journal-closed'
  /** The disk refused; nothing more is taken until the agent starts again. */
  | 'journal-failed';

export class JournalError extends Error {
  readonly code: JournalErrorCode;

  constructor(code: JournalErrorCode, message: string, options: { cause?: unknown } = {}) {
    super(message, options);
    this.name = 'JournalError';
    this.code = code;
  }
}
