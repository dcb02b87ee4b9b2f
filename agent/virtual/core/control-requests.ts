import { z } from 'zod';

const wallMs = z.number().min(0).max(3_600_000);
const mm = z.number().finite();
const direction = z.enum(['in', 'out']);

/** Everything that can be done to a rig from outside; see `edges/control.ts` for the words. */
export const controlRequestSchema = z.discriminatedUnion('do', [
  z.strictObject({ do: z.literal('snapshot') }),
  z.strictObject({ do: z.literal('guard'), open: z.boolean() }),
  z.strictObject({ do: z.literal('wire'), out: z.boolean() }),
  z.strictObject({ do: z.literal('spool-end') }),
  z.strictObject({ do: z.literal('spool'), mm: z.number().min(0) }),
  z.strictObject({ do: z.literal('slip'), mean: mm.default(0), sd: z.number().min(0).default(0) }),
  z.strictObject({ do: z.literal('jam'), on: z.boolean().default(true) }),
  z.strictObject({
    do: z.literal('blade'),
    state: z.enum(['new', 'dull']),
    uncut: z.number().min(0).max(1).default(1),
  }),
  z.strictObject({ do: z.literal('power'), on: z.boolean() }),
  z.strictObject({ do: z.literal('motor-power'), on: z.boolean() }),
  z.strictObject({ do: z.literal('reset') }),
  z.strictObject({ do: z.literal('error-stop') }),
  z.strictObject({ do: z.literal('usb'), plugged: z.boolean(), path: z.string().min(1).optional() }),
  z.strictObject({
    do: z.literal('noise'),
    kind: z.enum(['flip', 'drop', 'double', 'pair']),
    direction,
    bytes: z.number().int().min(0),
    probability: z.number().min(0).max(1).default(1),
  }),
  z.strictObject({
    do: z.literal('ok'),
    fault: z.enum(['swallow', 'double', 'split']),
    count: z.number().int().min(0).default(1),
  }),
  z.strictObject({ do: z.literal('mute'), ms: wallMs }),
  z.strictObject({ do: z.literal('busy'), ms: wallMs }),
  z.strictObject({ do: z.literal('heater'), warmsToC: mm.nullable() }),
  z.strictObject({ do: z.literal('hand-move'), axis: z.enum(['X', 'Y', 'Z', 'E']), mm }),
  z.strictObject({ do: z.literal('hand-place'), axis: z.enum(['X', 'Y', 'Z']), atMm: mm }),
]);

export type ControlInput = z.input<typeof controlRequestSchema>;
export type ControlRequest = z.output<typeof controlRequestSchema>;
export type ControlOf<Verb extends ControlRequest['do']> = Extract<ControlRequest, { do: Verb }>;
