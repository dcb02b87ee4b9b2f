import { z } from 'zod';
import { HOLD_REASONS } from '@/lib/fleet/run';
import { signalsSchema } from './signals';

/** What the firmware said of itself. `virtual` is true only when its machine type says so. */
export const firmwareSchema = z.object({
  name: z.string().max(200),
  machineType: z.string().max(200),
  virtual: z.boolean(),
  dialect: z.string().max(40),
  capabilities: z.record(z.string(), z.boolean()),
});

/** What the agent's runner is doing with a rig. */
export const RUNNER_STATES = [
  'idle',
  'holding-program',
  'homing',
  'trimming',
  'cutting',
  'pausing',
  'paused',
  'held',
  'stopping',
  'tray-full',
] as const;

export const rigReportSchema = z.object({
  rigId: z.uuid(),
  port: z.enum(['closed', 'opening', 'open', 'refused']),
  portProblem: z.string().max(200).nullable(),
  firmware: firmwareSchema.nullable(),
  signals: signalsSchema,
  runner: z.enum(RUNNER_STATES),
  runId: z.uuid().nullable(),
  programSha256: z.string().length(64).nullable(),
  piecesCut: z.number().int().min(0),
  holdReason: z.enum(HOLD_REASONS).nullable(),
  workHold: z.boolean(),
  /** The nonce the next moving command must repeat; made new by the agent after each command it takes. */
  challenge: z.string().min(16).max(64),
  /** The highest fencing number this agent has seen for the rig. */
  fence: z.number().int().min(0),
  /** The display's text, told only of virtual rigs, so that a learner without a machine can read it. */
  virtualDisplay: z.string().max(80).nullable(),
});

export const reportSchema = z.object({
  protocol: z.literal(1),
  sentAt: z.iso.datetime(),
  software: z.string().max(40),
  journalId: z.uuid(),
  /** Events in the journal that the server has not acknowledged. */
  backlog: z.number().int().min(0),
  rigs: z.array(rigReportSchema).max(64),
});

/** The agent measures its clock's skew from `serverAt`. */
export const reportAnswerSchema = z.object({ serverAt: z.iso.datetime() });

export type RigReport = z.infer<typeof rigReportSchema>;
export type Report = z.infer<typeof reportSchema>;
export type ReportAnswer = z.infer<typeof reportAnswerSchema>;
export type Firmware = z.infer<typeof firmwareSchema>;
export type RunnerState = (typeof RUNNER_STATES)[number];
