import { z } from 'zod';
import { wireDtoSchema } from './stock';

/** What is wrong or odd in a cut list; see lib/wire/cut-list/reading.ts. */
export const cutListProblemSchema = z.object({
  row: z.number().int().nullable(),
  column: z.string().nullable(),
  found: z.string(),
  instead: z.string(),
});

export const cutListLineSchema = z.object({
  row: z.number().int(),
  label: z.string().nullable(),
  wire: wireDtoSchema.nullable(),
  lengthMm: z.number().nullable(),
  toleranceMinusMm: z.number().nullable(),
  tolerancePlusMm: z.number().nullable(),
  pieces: z.number().int().nullable(),
});

/** A batch that was made of the very same file. */
export const sameFileSchema = z.object({
  batchId: z.uuid(),
  number: z.number().int(),
  name: z.string(),
  createdAt: z.iso.datetime(),
});

/** What was understood of an uploaded file. Nothing is saved yet. */
export const uploadPreviewSchema = z.object({
  fileName: z.string(),
  lines: z.array(cutListLineSchema),
  problems: z.array(cutListProblemSchema),
  warnings: z.array(cutListProblemSchema),
  sameFile: sameFileSchema.nullable(),
});

const fileName = z
  .string()
  .trim()
  .max(200)
  .transform((name) => name || 'cut list')
  .default('cut list');

export const previewUploadSchema = z.object({ fileName });

/** What goes with the file when it is saved as a batch. */
export const createFromUploadSchema = z.object({
  fileName,
  name: z.string().trim().min(1, 'Give the batch a name.').max(80, 'At most 80 characters.'),
  dueAt: z.iso.datetime().nullable().default(null),
  priority: z.coerce.number().int().min(1, 'From 1 to 5.').max(5, 'From 1 to 5.').default(3),
  queue: z.stringbool().default(false),
  /** The person saw that the same file was uploaded before and wants it all the same. */
  sameFileConfirmed: z.stringbool().default(false),
});

export const createdBatchSchema = z.object({ batchId: z.uuid() });

export type UploadPreview = z.infer<typeof uploadPreviewSchema>;
export type SameFile = z.infer<typeof sameFileSchema>;
