import { z } from 'zod';

const mm = z.number().finite();
const positive = z.number().finite().positive();

/** One number for each axis, with defaults; `X Y Z` in mm, `E` in feed units. */
function perAxis(value: z.ZodNumber, X: number, Y: number, Z: number, E: number) {
  return z
    .object({ X: value.default(X), Y: value.default(Y), Z: value.default(Z), E: value.default(E) })
    .prefault({});
}

const firmwareSchema = z.object({
  family: z.enum(['marlin', 'repetier']).default('marlin'),
  version: z.string().default('2.1.2'),
  emergencyParser: z.boolean().default(true),
  /** `ok N21 P15 B3` in place of `ok`. */
  advancedOk: z.boolean().default(false),
  display: z.boolean().default(true),
  beeper: z.boolean().default(true),
  /** End stop that the guard switch is wired to, as `M119` names it; `null` where no switch is fitted. */
  guardSwitch: z.string().nullable().default('x_max'),
  guardClosedReads: z.enum(['open', 'TRIGGERED']).default('TRIGGERED'),
  wireSwitch: z.boolean().default(true),
  /** Where `G92` of X, Y, Z goes: into an offset (main family, version 2) or into the position itself (1.0). */
  g92: z.enum(['offset', 'position']).default('offset'),
  receiveBytes: z.number().int().positive().default(128),
  queuedLines: z.number().int().positive().default(4),
  plannerMoves: z.number().int().min(2).default(16),
  stepsPerMm: perAxis(positive, 80, 80, 100, 93),
  speedMmS: perAxis(positive, 200, 200, 25, 60),
  accelerationMmS2: perAxis(positive, 1000, 1000, 500, 1000),
  homingSpeedMmS: positive.default(20),
  /** What the firmware calls the place of the home switch after `G28`. */
  homeMm: perAxis(mm, 0, 0, 0, 0),
  softLowestMm: perAxis(mm, 0, 0, 0, 0),
  softHighestMm: perAxis(mm, 200, 200, 200, 0),
  longestFeedMm: positive.default(200),
  coldBelowC: positive.default(170),
  steppersHoldS: positive.default(120),
  /** Boot loader and start-up, mechanical time. */
  bootMs: positive.default(1000),
  /** Between two `busy` lines, on the wall clock whatever the speed. */
  keepaliveMs: positive.default(2000),
});

const mechanicsSchema = z.object({
  cutAxis: z.enum(['X', 'Y', 'Z']).default('Z'),
  /** Places in the machine's own frame, in which the home switch of every axis stands at `switchMm`. */
  switchMm: perAxis(mm, 0, 0, 0, 0),
  lowestMm: perAxis(mm, -5, -5, -8, 0),
  highestMm: perAxis(mm, 205, 205, 60, 0),
  startMm: perAxis(mm, 0, 0, 0, 0),
  /** The cut axis closes the jaws at `closedMm`, they let wire pass again at `openMm`, and the springs of
   *  the handles push an unpowered axis back to `restMm`. */
  jaws: z
    .object({ closedMm: mm.default(-4), openMm: mm.default(-3), restMm: mm.default(-1) })
    .prefault({})
    .refine((jaws) => Math.sign(jaws.openMm - jaws.closedMm) === Math.sign(jaws.restMm - jaws.closedMm), {
      message: 'openMm and restMm lie on one side of closedMm',
    }),
  /** Wire that passes for one feed unit; 1 is a perfectly calibrated feed. */
  wirePerUnit: positive.default(1),
  /** Share of each feed move that is lost: normal, 0 to 1. */
  slip: z.object({ mean: mm.default(0), sd: z.number().min(0).default(0) }).prefault({}),
  spoolMm: z.number().min(0).default(100_000),
  /** Wire between the wire switch and the feed wheel, still fed after the spool's end. */
  tailMm: z.number().min(0).default(60),
  blade: z
    .object({
      cuts: z.number().int().min(0).default(0),
      /** Cuts after which 2 in 100 closings do not sever. */
      lifeCuts: positive.default(40_000),
      shape: positive.default(3),
    })
    .prefault({}),
  guardOpen: z.boolean().default(false),
  guardCutsMotorPower: z.boolean().default(false),
  ambientC: mm.default(20),
});

/** All that describes one virtual rig, apart from the paths it is reached by. */
export const rigSettingsSchema = z.object({
  name: z.string().default('rig'),
  seed: z.number().int().default(1),
  /** Mechanical time over wall time. */
  speed: positive.default(1),
  resetOnOpen: z.boolean().default(true),
  /** Whose coordinate the tally writes beside each closing. */
  registerAxis: z.enum(['X', 'Y', 'Z']).default('Y'),
  firmware: firmwareSchema.prefault({}),
  mechanics: mechanicsSchema.prefault({}),
});

export type RigInput = z.input<typeof rigSettingsSchema>;
export type RigSettings = z.output<typeof rigSettingsSchema>;
export type FirmwareSettings = RigSettings['firmware'];
export type MechanicsSettings = RigSettings['mechanics'];
