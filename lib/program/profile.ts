import { z } from 'zod';

const positive = z.number().positive();
const axis = z.enum(['X', 'Y', 'Z']);

/** Where the cut axis is and how it moves. Positions in mm on the firmware's own coordinate after homing. */
const cutAxisSchema = z.object({
  axis,
  /** `endstop`: `G28` of the cut axis alone. `declared`: a person puts the pusher at home by hand. */
  homing: z.enum(['endstop', 'declared']),
  homeMm: z.number(),
  standbyMm: z.number(),
  cutMm: z.number(),
  parkMm: z.number(),
  lowestMm: z.number(),
  highestMm: z.number(),
  speedMmS: positive,
  accelerationMmS2: positive,
  stepsPerMm: positive,
});

/** The feed: firmware coordinate E. `feedPerMm` is E units for one mm of wire (the calibration). */
const feedSchema = z.object({
  feedPerMm: positive,
  speedMmS: positive,
  accelerationMmS2: positive,
  longestMoveMm: positive.max(150),
  shortestPieceMm: positive,
  longestPieceMm: positive,
  trimMm: positive,
});

/** What is fitted. Anything `null` or `false` is shown as "not fitted" with what a person looks at instead. */
const fittedSchema = z.object({
  guardSwitch: z
    .object({
      endstop: z.string().regex(/^[a-z]_(min|max|probe)$|^z_probe$/),
      closedReads: z.enum(['open', 'TRIGGERED']),
    })
    .nullable(),
  guardCutsMotorPower: z.boolean(),
  hardwareStop: z.boolean(),
  wireSwitch: z.boolean(),
  display: z.boolean(),
  beeper: z.boolean(),
  heater: z.boolean(),
  emergencyParser: z.boolean(),
});

const serialSchema = z.object({
  baudRate: z.union([
    z.literal(57600),
    z.literal(115200),
    z.literal(230400),
    z.literal(250000),
    z.literal(500000),
  ]),
  resetsOnOpen: z.boolean(),
  /** Lines go out without number and checksum, for builds that refuse them; absent in profiles of before: numbered. */
  unnumbered: z.boolean().optional(),
});

/** A rig's versioned numbers. All lengths mm, speeds mm/s, accelerations mm/s². */
export const profileSchema = z
  .object({
    cutAxis: cutAxisSchema,
    feed: feedSchema,
    /** The axis that is never moved and keeps tag and count; `null` where none is free: a person settles the open piece. */
    registerAxis: axis.nullable(),
    /** The steppers are let go after this long a pause; then the rig homes before it moves on. */
    steppersHoldS: z.number().int().min(10).max(3600),
    fitted: fittedSchema,
    serial: serialSchema,
  })
  .superRefine((profile, ctx) => {
    const { cutAxis, feed } = profile;
    const complain = (path: string[], message: string) => ctx.addIssue({ code: 'custom', path, message });
    for (const name of ['homeMm', 'standbyMm', 'cutMm', 'parkMm'] as const) {
      if (cutAxis[name] < cutAxis.lowestMm || cutAxis[name] > cutAxis.highestMm) {
        complain(['cutAxis', name], 'must lie between the lowest and the highest position');
      }
    }
    if (cutAxis.cutMm === cutAxis.standbyMm)
      complain(['cutAxis', 'cutMm'], 'must differ from the standby position');
    if (profile.registerAxis === cutAxis.axis)
      complain(['registerAxis'], 'must be an axis the rig does not move');
    if (feed.shortestPieceMm > feed.longestPieceMm) {
      complain(['feed', 'shortestPieceMm'], 'must not be longer than the longest piece');
    }
  });

export type Profile = z.infer<typeof profileSchema>;

/** What one run is asked to do. `tag` 1 to 99 and `pieces` 1 to 9,999 fit the register's seven digits. */
export const runOrderSchema = z.object({
  tag: z.number().int().min(1).max(99),
  pieces: z.number().int().min(1).max(9999),
  lengthMm: positive,
});

export type RunOrder = z.infer<typeof runOrderSchema>;
