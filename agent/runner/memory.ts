import { z } from 'zod';
import { HOLD_REASONS } from '@/lib/fleet/run';

const count = z.number().int().min(0);

/** What the journal says of a run that was not cleared away. */
export const rememberedRunSchema = z.object({
  runId: z.uuid(),
  began: z.boolean(),
  ended: z.boolean(),
  cut: count,
  openCut: count.nullable(),
  doubt: count.nullable(),
  registered: z.boolean(),
  standbyCount: z.number().int().nullable(),
  mustHome: z.boolean(),
  measureAgain: z.boolean(),
  /** The count from which the first pieces are to be measured; null: they are. */
  measureFrom: count.nullable(),
  hold: z.enum(HOLD_REASONS).nullable(),
  paused: z.boolean(),
  stop: z.object({ personId: z.uuid().nullable() }).nullable(),
});

/** What the journal says of a rig. */
export const rememberedSchema = z.object({
  fence: count,
  /** Ids of the moving commands that were carried out last. */
  taken: z.array(z.uuid()),
  /** Who works on the rig. */
  workHold: z.uuid().nullable(),
  run: rememberedRunSchema.nullable(),
});

export type RememberedRun = z.infer<typeof rememberedRunSchema>;
export type Remembered = z.infer<typeof rememberedSchema>;

export function freshMemory(): Remembered {
  return { fence: 0, taken: [], workHold: null, run: null };
}

export function freshRun(runId: string): RememberedRun {
  return {
    runId,
    began: false,
    ended: false,
    cut: 0,
    openCut: null,
    doubt: null,
    registered: false,
    standbyCount: null,
    mustHome: false,
    measureAgain: false,
    measureFrom: null,
    hold: null,
    paused: false,
    stop: null,
  };
}
