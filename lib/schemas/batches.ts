import { z } from 'zod';
import { LOT_STATES } from '@/lib/fleet/lot';
import { wireDtoSchema } from './stock';

const moment = z.iso.datetime();

export const BATCH_STATES = ['draft', 'queued', 'cutting', 'done', 'withdrawn'] as const;

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

export const batchLineInputSchema = z.object({
  label: z.string().trim().min(1, 'Give the line a label.').max(80, 'At most 80 characters.'),
  wireId: z.uuid('Pick a wire.'),
  lengthMm: z
    .number('Enter a length in mm.')
    .positive('Enter a length over 0.')
    .max(20_000, 'At most 20,000 mm.'),
  toleranceMinusMm: z.number('Enter a number.').min(0, 'Not below 0.').max(1000),
  tolerancePlusMm: z.number('Enter a number.').min(0, 'Not below 0.').max(1000),
  pieces: z
    .number('Enter a whole number.')
    .int('Enter a whole number.')
    .min(1, 'At least 1.')
    .max(100_000, 'At most 100,000.'),
});

export const batchInputSchema = z.object({
  name: z.string().trim().min(1, 'Give the batch a name.').max(80, 'At most 80 characters.'),
  dueAt: moment.nullable(),
  priority: z.number().int().min(1).max(5),
  lines: z
    .array(batchLineInputSchema)
    .min(1, 'A batch needs at least one line.')
    .max(2000, 'At most 2,000 lines.'),
});

export type LotDto = z.infer<typeof lotDtoSchema>;
export type BatchLineDto = z.infer<typeof batchLineDtoSchema>;
export type BatchSummaryDto = z.infer<typeof batchSummaryDtoSchema>;
export type BatchDto = z.infer<typeof batchDtoSchema>;
export type BatchInput = z.infer<typeof batchInputSchema>;
export type BatchLineInput = z.infer<typeof batchLineInputSchema>;
