import { z } from 'zod';
import { BATCH_STATES } from '@/lib/fleet/batch-state';
import { LOT_STATES } from '@/lib/fleet/lot';
import { LINE_LIMITS } from './line-limits';
import { wireDtoSchema } from './stock';

const moment = z.iso.datetime();

/** One lot as people see it. `waitingReason` says why it is on no rig. */
export const lotDtoSchema = z.object({
  id: z.uuid(),
  batchId: z.uuid(),
  lineId: z.uuid(),
  number: z.number().int(),
  pieces: z.number().int(),
  state: z.enum(LOT_STATES),
  rigId: z.uuid().nullable(),
  rigName: z.string().nullable(),
  runId: z.uuid().nullable(),
  cut: z.number().int(),
  bagged: z.number().int().nullable(),
  bagCode: z.string().nullable(),
  waitingReason: z.string(),
});

export const batchLineDtoSchema = z.object({
  id: z.uuid(),
  position: z.number().int(),
  label: z.string(),
  wire: wireDtoSchema,
  lengthMm: z.number(),
  toleranceMinusMm: z.number(),
  tolerancePlusMm: z.number(),
  pieces: z.number().int(),
  cut: z.number().int(),
  bagged: z.number().int(),
  lots: z.array(lotDtoSchema),
});

export const batchSummaryDtoSchema = z.object({
  id: z.uuid(),
  number: z.number().int(),
  name: z.string(),
  state: z.enum(BATCH_STATES),
  dueAt: moment.nullable(),
  priority: z.number().int(),
  lines: z.number().int(),
  pieces: z.number().int(),
  cut: z.number().int(),
  bagged: z.number().int(),
  wires: z.array(wireDtoSchema),
  createdAt: moment,
  waitingReason: z.string(),
});

export const batchDtoSchema = batchSummaryDtoSchema.extend({
  revision: z.number().int(),
  sourceName: z.string().nullable(),
  createdByName: z.string(),
  lineList: z.array(batchLineDtoSchema),
});

const tolerance = z
  .number('Enter a number.')
  .min(0, 'Not below 0.')
  .max(LINE_LIMITS.toleranceMostMm, `At most ${LINE_LIMITS.toleranceMostMm} mm.`);

export const batchLineInputSchema = z.object({
  label: z
    .string()
    .trim()
    .min(1, 'Give the line a label.')
    .max(LINE_LIMITS.labelCharactersMost, `At most ${LINE_LIMITS.labelCharactersMost} characters.`),
  wireId: z.uuid('Pick a wire.'),
  lengthMm: z
    .number('Enter a length in mm.')
    .min(0.001, 'Enter a length over 0.')
    .max(LINE_LIMITS.lengthMostMm, 'At most 20,000 mm.'),
  toleranceMinusMm: tolerance,
  tolerancePlusMm: tolerance,
  pieces: z
    .number('Enter a whole number.')
    .int('Enter a whole number.')
    .min(1, 'At least 1.')
    .max(LINE_LIMITS.piecesMost, 'At most 100,000.'),
});

const head = {
  name: z.string().trim().min(1, 'Give the batch a name.').max(80, 'At most 80 characters.'),
  dueAt: moment.nullable(),
  priority: z.number().int().min(1, 'From 1 to 5.').max(5, 'From 1 to 5.'),
};

export const batchInputSchema = z.object({
  ...head,
  lines: z
    .array(batchLineInputSchema)
    .min(1, 'A batch needs at least one line.')
    .max(LINE_LIMITS.linesMost, 'At most 2,000 lines.'),
});

/** A batch made by hand; `queue` hands it to the rigs at once. */
export const createBatchSchema = batchInputSchema.extend({ queue: z.boolean() });

/** A line that has an id is one of the batch's already. */
export const changedLineSchema = batchLineInputSchema.extend({ id: z.uuid().nullable() });

/** `revision` is the one that was looked at: somebody else's change in between is not overwritten. */
export const changeBatchSchema = z.object({
  ...head,
  batchId: z.uuid(),
  revision: z.number().int(),
  lines: z
    .array(changedLineSchema)
    .min(1, 'A batch needs at least one line. Withdraw it instead.')
    .max(LINE_LIMITS.linesMost, 'At most 2,000 lines.'),
});

export const oneBatchSchema = z.object({ batchId: z.uuid() });

/** What a withdrawal left behind, for the person who did it. */
export const withdrawalSchema = z.object({
  withdrawnPieces: z.number().int(),
  /** Cut already, in bags or trays. */
  cutPieces: z.number().int(),
  /** On rigs that are cutting now; they finish their lot. */
  stillCutting: z.array(z.object({ rigName: z.string(), pieces: z.number().int(), cut: z.number().int() })),
});

export type LotDto = z.infer<typeof lotDtoSchema>;
export type BatchLineDto = z.infer<typeof batchLineDtoSchema>;
export type BatchSummaryDto = z.infer<typeof batchSummaryDtoSchema>;
export type BatchDto = z.infer<typeof batchDtoSchema>;
export type BatchInput = z.infer<typeof batchInputSchema>;
export type BatchLineInput = z.infer<typeof batchLineInputSchema>;
export type ChangedLine = z.infer<typeof changedLineSchema>;
export type Withdrawal = z.infer<typeof withdrawalSchema>;
