import { z } from 'zod';

export const wireDtoSchema = z.object({
  id: z.uuid(),
  gaugeAwg: z.number().int(),
  conductor: z.string(),
  insulation: z.string(),
  /** IEC 60757 letters. */
  colour: z.string(),
  outsideDiameterMm: z.number(),
});

export const spoolDtoSchema = z.object({
  id: z.uuid(),
  label: z.string(),
  wire: wireDtoSchema,
  lengthMm: z.number(),
  leftMm: z.number(),
  place: z.string(),
  rigName: z.string().nullable(),
});

export const bladeDtoSchema = z.object({
  id: z.uuid(),
  label: z.string(),
  model: z.string(),
  cuts: z.number().int(),
  rigId: z.uuid().nullable(),
  fittedAt: z.iso.datetime().nullable(),
});

export type WireDto = z.infer<typeof wireDtoSchema>;
export type SpoolDto = z.infer<typeof spoolDtoSchema>;
export type BladeDto = z.infer<typeof bladeDtoSchema>;
