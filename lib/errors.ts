/** The closed list of what can go wrong, with its HTTP status and the words a person reads. */
export const ERRORS = {
  'not-signed-in': { status: 401, title: 'Sign in first.' },
  'not-allowed': { status: 403, title: 'Your role does not allow this. Ask an owner.' },
  'not-found': { status: 404, title: 'There is nothing here by that name.' },
  'bad-input': { status: 400, title: 'Something in what you sent is not right. Look at the marked fields.' },
  'too-many-attempts': { status: 429, title: 'Too many attempts. Wait a few minutes, then try again.' },
  'sign-in-refused': { status: 401, title: 'That e-mail and password do not match. Try again.' },
  'already-exists': { status: 409, title: 'There is one like that already. Choose another name.' },
  'changed-meanwhile': { status: 409, title: 'Somebody changed this meanwhile. Reload and look again.' },
  'illegal-step': {
    status: 409,
    title: 'That is not possible in the state it is in now. Reload and look again.',
  },
  'workshop-not-empty': { status: 409, title: 'This workshop has an owner already. Sign in.' },
  'same-file': {
    status: 409,
    title: 'This very file was uploaded before. Confirm if you want it a second time.',
  },
  'file-too-large': { status: 413, title: 'The file is too large. Split it into files under 1 MB.' },
  'pairing-refused': {
    status: 401,
    title: 'The pairing code is wrong, used or too old. Ask an owner for a new one.',
  },
  'token-refused': { status: 401, title: 'The agent’s token is not known. Pair the agent again.' },
  'protocol-unknown': {
    status: 426,
    title: 'This agent speaks another version. Update the older of the two.',
  },
  'agent-too-old': {
    status: 426,
    title: 'This agent is too old for the server. Put a new one in its place.',
  },
  'journal-gap': { status: 409, title: 'Events are missing before these. Send them from the number given.' },
  'event-conflict': {
    status: 409,
    title: 'An event under this number is already stored with other content.',
  },
  'rig-not-bound': { status: 403, title: 'This agent does not serve that rig.' },
  'rig-silent': { status: 409, title: 'The rig is not heard. It may still be moving: go and look.' },
  'rig-busy': { status: 409, title: 'The rig has a lot already.' },
  'notes-not-acknowledged': { status: 409, title: 'Read the interlock notes and confirm them first.' },
  'presence-missing': { status: 409, title: 'Type the code that the rig’s display shows.' },
  'presence-wrong': { status: 409, title: 'That is not the code on the rig’s display. Read it again.' },
  'work-hold': { status: 409, title: 'Somebody works on this rig. Only they can end it, at the rig.' },
  'tray-not-cleared': {
    status: 409,
    title: 'The tray still holds the last run. Empty it and confirm the bag.',
  },
  'guard-open': { status: 409, title: 'The guard is open or not read. Shut it.' },
  'heater-on': { status: 409, title: 'A heater is on, warm or not read. Switch it off and let it cool.' },
  'wrong-wire': { status: 409, title: 'Another wire is loaded than this lot needs.' },
  'wire-missing': { status: 409, title: 'There is no wire at the guide. Thread it in.' },
  'wire-short': { status: 409, title: 'The spool has less wire left than this lot needs.' },
  'out-of-service': { status: 409, title: 'The rig is out of service.' },
  'program-not-held': { status: 409, title: 'The agent does not hold the program yet. Wait a moment.' },
  'program-refused': { status: 409, title: 'The program would leave the rig’s limits. Look at the profile.' },
  'first-pieces-open': { status: 409, title: 'Enter the lengths of the first pieces first.' },
  'doubt-open': { status: 409, title: 'A piece is in doubt. Count or discard it first.' },
  'command-late': {
    status: 409,
    title: 'The rig did not get the command in time. Nothing was done. Try again.',
  },
  'command-replayed': { status: 409, title: 'This command was carried out before. Nothing was done again.' },
  'challenge-wrong': {
    status: 409,
    title: 'The rig has moved on since you looked. Look again, then repeat.',
  },
  'fence-old': { status: 409, title: 'The rig was given to somebody else meanwhile. Reload.' },
  'rig-not-connected': {
    status: 409,
    title: 'The agent does not reach the rig by USB. Look at the cable and power.',
  },
  'service-away': { status: 503, title: 'A part of Ellwand is not answering. Try again in a minute.' },
  unexpected: { status: 500, title: 'Something went wrong on our side. Tell the owner the number shown.' },
} as const;

export type ErrorCode = keyof typeof ERRORS;

/** One thing that is wrong with one field of an input; `path` as in `lines.3.lengthMm`. */
export interface FieldProblem {
  path: string;
  message: string;
}

/** The only error that services throw on purpose. `details` is shown to the caller, the cause only logged. */
export class EllwandError extends Error {
  readonly code: ErrorCode;
  readonly fields: FieldProblem[];
  readonly details: Record<string, unknown>;

  constructor(
    code: ErrorCode,
    options: { fields?: FieldProblem[]; details?: Record<string, unknown>; cause?: unknown } = {},
  ) {
    super(code, { cause: options.cause });
    this.name = 'EllwandError';
    this.code = code;
    this.fields = options.fields ?? [];
    this.details = options.details ?? {};
  }
}
