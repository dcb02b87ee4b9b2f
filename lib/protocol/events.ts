import { z } from 'zod';
import { HOLD_REASONS, MISFEED_CAUSES } from '@/lib/fleet/run';
import { EVENTS_PER_BATCH_MAX } from './version';

const ofRig = { rigId: z.uuid() };
const ofRun = { ...ofRig, runId: z.uuid() };
const piece = z.number().int().min(1).max(9999);
const person = z.uuid().nullable();

/** What an agent writes into its journal and uploads: each kind with exactly what it says. */
export const eventBodySchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('agent-started'), software: z.string().max(40) }),
  z.object({ kind: z.literal('rig-connected'), ...ofRig, firmwareName: z.string().max(200) }),
  z.object({ kind: z.literal('rig-lost'), ...ofRig, reason: z.string().max(200) }),
  z.object({ kind: z.literal('program-held'), ...ofRun, programSha256: z.string().length(64) }),
  z.object({ kind: z.literal('program-refused'), ...ofRun, problems: z.array(z.string().max(200)).max(20) }),
  z.object({ kind: z.literal('program-dropped'), ...ofRun }),
  z.object({ kind: z.literal('run-started'), ...ofRun, personId: z.uuid(), commandId: z.uuid() }),
  z.object({ kind: z.literal('trim-cut'), ...ofRun, wireMm: z.number().min(0) }),
  /** The rig itself said so: its register was written with this number. `wireMm` is what it fed for the piece. */
  z.object({
    kind: z.literal('piece-cut'),
    ...ofRun,
    piece,
    wireMm: z.number().min(0),
    jawsClosedAt: z.iso.datetime(),
  }),
  /** Law 3: the cut was commanded and never confirmed. */
  z.object({ kind: z.literal('piece-doubted'), ...ofRun, piece, wireMm: z.number().min(0) }),
  z.object({
    kind: z.literal('piece-settled'),
    ...ofRun,
    piece,
    answer: z.enum(['count', 'discard']),
    personId: z.uuid(),
  }),
  z.object({
    kind: z.literal('misfeed'),
    ...ofRun,
    piece,
    cause: z.enum(MISFEED_CAUSES),
    foundBy: z.enum(['rig', 'person']),
    personId: person,
  }),
  z.object({ kind: z.literal('run-paused'), ...ofRun, personId: person }),
  z.object({
    kind: z.literal('run-held'),
    ...ofRun,
    reason: z.enum(HOLD_REASONS),
    note: z.string().max(300),
  }),
  z.object({ kind: z.literal('run-went-on'), ...ofRun, personId: z.uuid(), commandId: z.uuid() }),
  z.object({
    kind: z.literal('run-ended'),
    ...ofRun,
    outcome: z.enum(['complete', 'stopped']),
    pieces: z.number().int().min(0),
    personId: person,
  }),
  z.object({ kind: z.literal('work-hold-began'), ...ofRig, personId: z.uuid() }),
  z.object({ kind: z.literal('work-hold-ended'), ...ofRig, personId: z.uuid() }),
  z.object({ kind: z.literal('guard-opened'), ...ofRig }),
  z.object({ kind: z.literal('guard-closed'), ...ofRig }),
  z.object({ kind: z.literal('firmware-said'), ...ofRig, text: z.string().max(300) }),
]);

export const eventSchema = z.object({
  sequence: z.number().int().min(1),
  at: z.iso.datetime(),
  body: eventBodySchema,
});

/** `POST /api/agent/events`: in order and without gaps from the first one's sequence. */
export const eventUploadSchema = z.object({
  protocol: z.literal(1),
  journalId: z.uuid(),
  events: z.array(eventSchema).min(1).max(EVENTS_PER_BATCH_MAX),
});

/** All events up to and with this sequence are stored. */
export const eventUploadAnswerSchema = z.object({ storedThrough: z.number().int().min(0) });

export type EventBody = z.infer<typeof eventBodySchema>;
export type EventKind = EventBody['kind'];
export type AgentEvent = z.infer<typeof eventSchema>;
export type EventUpload = z.infer<typeof eventUploadSchema>;
export type EventUploadAnswer = z.infer<typeof eventUploadAnswerSchema>;
