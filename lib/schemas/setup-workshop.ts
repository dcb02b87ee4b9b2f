import { z } from 'zod';

function isTimeZone(name: string): boolean {
  try {
    return new Intl.DateTimeFormat('en', { timeZone: name }).resolvedOptions().timeZone !== '';
  } catch {
    return false;
  }
}

const shiftStart = z.string().regex(/^([01]\d|2[0-3]):[0-5]\d$/, 'Write a time like 06:00.');
const tolerance = z
  .number('Enter whole millimetres.')
  .int('Enter whole millimetres.')
  .min(0, 'Not below 0.')
  .max(1000, 'At most 1,000 mm.');

export const workshopSchema = z.object({
  name: z.string().trim().min(1, 'Enter the workshop’s name.').max(80, 'At most 80 characters.'),
  timeZone: z.string().refine(isTimeZone, 'Write a time zone like Europe/Vienna.'),
  shiftStarts: z
    .array(shiftStart)
    .min(1, 'Enter at least one start of a shift.')
    .max(6, 'At most six shifts.')
    .transform((starts) => [...new Set(starts)].sort()),
  firstPieces: z.number('Enter a whole number.').int('Enter a whole number.').min(0).max(50, 'At most 50.'),
  lotPiecesMost: z
    .number('Enter a whole number.')
    .int('Enter a whole number.')
    .min(1, 'At least 1.')
    .max(9999, 'At most 9,999.'),
  toleranceMinusMm: tolerance,
  tolerancePlusMm: tolerance,
});

export type WorkshopDto = z.infer<typeof workshopSchema>;
