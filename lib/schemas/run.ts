import { z } from 'zod';
import { HOLD_REASONS, MISFEED_CAUSES, RUN_STATES } from '@/lib/fleet/run';
import { wireDtoSchema } from './stock';

const moment = z.iso.datetime();

/** One run with its counts. `bagged` = cut less scrapped, sampled and doubted; `bagCode` once it is labelled. */
export const runDtoSchema = z.object({
  id: z.uuid(),
  rigId: z.uuid(),
  rigName: z.string(),
  lotId: z.uuid(),
  lotNumber: z.number().int(),
  batchId: z.uuid(),
  batchName: z.string(),
  batchDueAt: moment.nullable(),
  lineLabel: z.string(),
  wire: wireDtoSchema,
  lengthMm: z.number(),
  toleranceMinusMm: z.number(),
  tolerancePlusMm: z.number(),
  pieces: z.number().int(),
  cut: z.number().int(),
  scrapped: z.number().int(),
  sampled: z.number().int(),
  doubted: z.number().int(),
  bagged: z.number().int(),
  surplus: z.number().int(),
  state: z.enum(RUN_STATES),
  stateSince: moment,
  holdReason: z.enum(HOLD_REASONS).nullable(),
  holdNote: z.string(),
  doubtPiece: z.number().int().nullable(),
  firstPieces: z.number().int(),
  /** Pieces whose lengths must be entered before the run may go on; empty when none are asked for. */
  piecesToMeasure: z.array(z.number().int()),
  programHeld: z.boolean(),
  expectedS: z.number(),
  expectedEndAt: moment.nullable(),
  wireNeededMm: z.number(),
  startedByName: z.string().nullable(),
  startedAt: moment.nullable(),
  lastPieceAt: moment.nullable(),
  endedAt: moment.nullable(),
  outcome: z.enum(['complete', 'stopped']).nullable(),
  bagCode: z.string().nullable(),
});

const runId = z.uuid();
/** What the rig's display showed; empty or missing where no display is fitted. */
const presenceCode = z.string().trim().max(12).nullable().default(null);

export const acknowledgeNotesSchema = z.object({
  runId,
  notesVersion: z.number().int().min(1),
  full: z.boolean(),
});
export const startRunSchema = z.object({ runId, presenceCode });
export const goOnSchema = z.object({ runId, presenceCode });
export const pauseRunSchema = z.object({ runId });
export const stopRunSchema = z.object({ runId });
export const holdRunSchema = z.object({ runId, cause: z.enum(MISFEED_CAUSES, 'Pick one of the causes.') });
export const settlePieceSchema = z.object({ runId, answer: z.enum(['count', 'discard']) });
export const releaseLotSchema = z.object({
  runId,
  reason: z.string().trim().min(3, 'Say why, in a few words.').max(200),
});
export const measurePiecesSchema = z.object({
  runId,
  /** One length a piece, in mm, for exactly the pieces asked for. */
  lengths: z
    .array(
      z.object({
        piece: z.number().int().min(1).max(9999),
        lengthMm: z.number('Enter a length in mm.').positive('Enter a length in mm.').max(20_000),
      }),
    )
    .min(1)
    .max(50),
});
export const scrapPiecesSchema = z.object({
  runId,
  kind: z.enum(['scrap', 'sample', 'doubt']),
  /** May be negative to correct an earlier entry. */
  pieces: z
    .number()
    .int()
    .min(-9999)
    .max(9999)
    .refine((pieces) => pieces !== 0, 'Enter how many pieces.'),
  reason: z.string().trim().min(3, 'Say why, in a few words.').max(200),
});
export const clearTraySchema = z.object({
  runId,
  scrapped: z.number().int().min(0).max(9999),
  sampled: z.number().int().min(0).max(9999),
});

/** Takes a prepared run off a rig that is heard: nothing was cut yet. */
export const dropRunSchema = z.object({
  runId,
  reason: z.string().trim().min(3, 'Say why, in a few words.').max(200),
});
export const beginWorkHoldSchema = z.object({
  rigId: z.uuid(),
  reason: z.string().trim().max(200).default(''),
});
export const endWorkHoldSchema = z.object({ rigId: z.uuid() });
export const showCodeSchema = z.object({ rigId: z.uuid() });
export const confirmBagSchema = z.object({
  code: z.string().trim().toUpperCase().min(4, 'Scan the label, or type its code.').max(40),
});

/** What became of a command: `waiting` when the rig did not answer within the wait. */
export const commandOutcomeSchema = z.object({
  commandId: z.uuid(),
  outcome: z.enum(['done', 'refused', 'waiting']),
  code: z.string().nullable(),
});

export const bagDtoSchema = z.object({
  code: z.string(),
  runId: z.uuid(),
  batchName: z.string(),
  batchNumber: z.number().int(),
  lotNumber: z.number().int(),
  lineLabel: z.string(),
  wire: wireDtoSchema,
  lengthMm: z.number(),
  toleranceMinusMm: z.number(),
  tolerancePlusMm: z.number(),
  pieces: z.number().int(),
  rigName: z.string(),
  bladeLabel: z.string().nullable(),
  spoolLabel: z.string().nullable(),
  clearedByName: z.string(),
  clearedAt: moment,
});

/** A label to print; not `confirmed`: the pieces still lie in the tray. */
export const labelDtoSchema = z.object({ bag: bagDtoSchema, confirmed: z.boolean() });

export type RunDto = z.infer<typeof runDtoSchema>;
export type BagDto = z.infer<typeof bagDtoSchema>;
export type LabelDto = z.infer<typeof labelDtoSchema>;
export type CommandOutcome = z.infer<typeof commandOutcomeSchema>;
