import { z } from 'zod';
import { ERRORS, type ErrorCode } from '@/lib/errors';
import { MISFEED_CAUSES } from '@/lib/fleet/run';

const errorCodes = Object.keys(ERRORS) as [ErrorCode, ...ErrorCode[]];

const envelope = {
  id: z.uuid(),
  rigId: z.uuid(),
  /** Who gave it; the agent writes it into its journal. */
  personId: z.uuid(),
  fence: z.number().int().min(0),
  issuedAt: z.iso.datetime(),
};

/**
 * What the server vouches for when something is to move (law 5); the agent checks it against what it knows.
 * `spoolLeftMm` null: no spool is loaded.
 */
export const conditionsSchema = z.object({
  notesVersion: z.number().int().min(1),
  acknowledgedBy: z.uuid(),
  acknowledgedAt: z.iso.datetime(),
  trayCleared: z.boolean(),
  workHold: z.boolean(),
  loadedWireId: z.uuid().nullable(),
  spoolLeftMm: z.number().min(0).nullable(),
});

const moving = {
  ...envelope,
  /** The agent's own nonce, from its latest report. */
  challenge: z.string(),
  /** What the rig's display showed; null where no display is fitted. */
  presenceCode: z.string().max(12).nullable(),
  conditions: conditionsSchema,
};

/** Commands that may be followed by motion: refused by the agent unless every condition of law 5 holds. */
export const movingCommandSchema = z.discriminatedUnion('kind', [
  z.object({
    kind: z.literal('start-run'),
    ...moving,
    runId: z.uuid(),
    programSha256: z.string().length(64),
  }),
  z.object({
    kind: z.literal('go-on'),
    ...moving,
    runId: z.uuid(),
    /** A first piece was out of tolerance: hold again after as many pieces as the program asked to be measured. */
    firstPiecesAgain: z.boolean(),
  }),
]);

/** Commands after which nothing moves that did not move before. Stops need no challenge, fence or age. */
export const quietCommandSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('take-program'), ...envelope, runId: z.uuid() }),
  z.object({ kind: z.literal('drop-program'), ...envelope, runId: z.uuid() }),
  z.object({ kind: z.literal('show-code'), ...envelope }),
  z.object({ kind: z.literal('pause'), ...envelope, runId: z.uuid() }),
  z.object({ kind: z.literal('stop'), ...envelope, runId: z.uuid() }),
  z.object({ kind: z.literal('hold'), ...envelope, runId: z.uuid(), cause: z.enum(MISFEED_CAUSES) }),
  z.object({
    kind: z.literal('settle-piece'),
    ...envelope,
    runId: z.uuid(),
    answer: z.enum(['count', 'discard']),
  }),
  z.object({ kind: z.literal('begin-work-hold'), ...envelope }),
  z.object({ kind: z.literal('end-work-hold'), ...envelope }),
  z.object({ kind: z.literal('clear-tray'), ...envelope, runId: z.uuid() }),
  z.object({ kind: z.literal('reload-rigs'), ...envelope }),
]);

export const commandSchema = z.union([movingCommandSchema, quietCommandSchema]);

/** One line of the command stream (`GET /api/agent/commands`, newline-delimited JSON). */
export const streamLineSchema = z.discriminatedUnion('line', [
  z.object({ line: z.literal('hello'), protocol: z.literal(1), serverAt: z.iso.datetime() }),
  z.object({ line: z.literal('command'), command: commandSchema }),
  z.object({ line: z.literal('ping'), serverAt: z.iso.datetime() }),
]);

/** What the agent answers to one command (`POST /api/agent/commands/{id}/answer`). */
export const commandAnswerSchema = z.discriminatedUnion('outcome', [
  z.object({ outcome: z.literal('done'), at: z.iso.datetime() }),
  z.object({
    outcome: z.literal('refused'),
    at: z.iso.datetime(),
    code: z.enum(errorCodes),
    /** Told with `protocol-unknown`: the version that the agent speaks, in which there is no such command. */
    details: z.object({ spoken: z.number().int() }).optional(),
  }),
]);

export type Conditions = z.infer<typeof conditionsSchema>;
export type MovingCommand = z.infer<typeof movingCommandSchema>;
export type QuietCommand = z.infer<typeof quietCommandSchema>;
export type Command = z.infer<typeof commandSchema>;
export type CommandKind = Command['kind'];
export type StreamLine = z.infer<typeof streamLineSchema>;
export type CommandAnswer = z.infer<typeof commandAnswerSchema>;
