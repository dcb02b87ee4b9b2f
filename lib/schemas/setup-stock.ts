import { z } from 'zod';
import { colourCode, parseColour } from '@/lib/wire/colour';
import { THICKEST_AWG, THINNEST_AWG } from '@/lib/wire/gauge';

const label = z.string().trim().min(1, 'Give it a label.').max(40, 'At most 40 characters.');
const place = z.string().trim().max(80, 'At most 80 characters.').default('');
const gauge = `A whole AWG from ${THICKEST_AWG} to ${THINNEST_AWG}.`;

/** IEC 60757 letters of one or two colours, brought into the standard's order. */
const colour = z.string().transform((typed, ctx) => {
  const parsed = parseColour(typed);
  if (parsed) return colourCode(parsed);
  ctx.addIssue({ code: 'custom', message: 'Write IEC 60757 letters, like GN or RDBU.' });
  return z.NEVER;
});

export const addWireSchema = z.object({
  gaugeAwg: z.number(gauge).int(gauge).min(THICKEST_AWG, gauge).max(THINNEST_AWG, gauge),
  conductor: z.string().trim().min(1, 'Say what the conductor is.').max(80, 'At most 80 characters.'),
  insulation: z
    .string()
    .trim()
    .toUpperCase()
    .min(1, 'Say what the insulation is, like ETFE.')
    .max(40, 'At most 40 characters.'),
  colour,
  outsideDiameterMm: z
    .number('Enter the outside diameter in mm.')
    .min(0.1, 'At least 0.1 mm.')
    .max(5, 'At most 5 mm.'),
});

export const addSpoolSchema = z.object({
  label,
  wireId: z.uuid('Pick a wire.'),
  lengthMm: z
    .number('Enter the length of wire on it.')
    .positive('Enter a length over 0.')
    .max(10_000_000, 'At most 10,000 m.'),
  place,
});
export const endSpoolSchema = z.object({ spoolId: z.uuid() });
export const loadSpoolSchema = z.object({ rigId: z.uuid(), spoolId: z.uuid('Pick a spool.').nullable() });

export const addBladeSchema = z.object({
  label,
  model: z.string().trim().min(1, 'Say which cutter it is.').max(80, 'At most 80 characters.'),
});
export const fitBladeSchema = z.object({ bladeId: z.uuid('Pick a blade.'), rigId: z.uuid('Pick a rig.') });
export const removeBladeSchema = z.object({
  bladeId: z.uuid(),
  reason: z.string().trim().min(3, 'Say why, in a few words.').max(200, 'At most 200 characters.'),
});
