import { z } from 'zod';

const readAt = z.iso.datetime();

/** A reading the rig gave, with the agent's time of reading; or that the rig has no such thing. */
export const guardSignalSchema = z.discriminatedUnion('reading', [
  z.object({ reading: z.enum(['closed', 'open']), readAt }),
  z.object({ reading: z.literal('unknown') }),
  z.object({ reading: z.literal('not fitted') }),
]);

export const wireSignalSchema = z.discriminatedUnion('reading', [
  z.object({ reading: z.enum(['present', 'missing']), readAt }),
  z.object({ reading: z.literal('unknown') }),
  z.object({ reading: z.literal('not fitted') }),
]);

export const heaterSignalSchema = z.discriminatedUnion('reading', [
  z.object({ reading: z.enum(['off', 'on', 'warm']), targetC: z.number(), actualC: z.number(), readAt }),
  z.object({ reading: z.literal('unknown') }),
  z.object({ reading: z.literal('not fitted') }),
]);

export const signalsSchema = z.object({
  guard: guardSignalSchema,
  wire: wireSignalSchema,
  heater: heaterSignalSchema,
});

export type Signals = z.infer<typeof signalsSchema>;

/** An actual temperature above this, in °C, counts as warm: motors may be hot, heaters must be cold. */
export const HEATER_WARM_C = 50;
