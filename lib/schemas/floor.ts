import { z } from 'zod';
import { ALARM_PRIORITIES, type AlarmKind } from '@/lib/fleet/alarms';
import { RIG_STATES } from '@/lib/fleet/rig-state';
import { profileSchema } from '@/lib/program/profile';
import { signalsSchema } from '@/lib/protocol/signals';
import { runDtoSchema } from './run';
import { bladeDtoSchema, spoolDtoSchema } from './stock';

const moment = z.iso.datetime();
const alarmKinds = Object.keys(ALARM_PRIORITIES) as [AlarmKind, ...AlarmKind[]];

export const alarmDtoSchema = z.object({
  id: z.uuid(),
  kind: z.enum(alarmKinds),
  priority: z.number().int(),
  rigId: z.uuid(),
  rigName: z.string(),
  runId: z.uuid().nullable(),
  raisedAt: moment,
  acknowledgedByName: z.string().nullable(),
  acknowledgedAt: moment.nullable(),
  details: z.record(z.string(), z.union([z.string(), z.number()])),
});

/** One rig as the floor and its own page show it. `state` is as of `at`; the screen re-derives silence from `heardAt`. */
export const rigDtoSchema = z.object({
  id: z.uuid(),
  at: moment,
  name: z.string(),
  bay: z.string(),
  benchOrder: z.number().int(),
  state: z.enum(RIG_STATES),
  heardAt: moment.nullable(),
  connected: z.boolean(),
  portProblem: z.string().nullable(),
  agentName: z.string().nullable(),
  firmwareName: z.string().nullable(),
  virtual: z.boolean(),
  virtualDisplay: z.string().nullable(),
  signals: signalsSchema.nullable(),
  fitted: profileSchema.shape.fitted.nullable(),
  /** By `guardDelayS` for the run's length, else the profile's longest; null: nothing tells of the guard, or no profile. */
  guardDelayS: z.number().nullable(),
  profileVersion: z.number().int().nullable(),
  notesVersion: z.number().int().nullable(),
  workHold: z
    .object({ personId: z.uuid(), personName: z.string(), beganAt: moment, standstillAt: moment.nullable() })
    .nullable(),
  outOfServiceReason: z.string().nullable(),
  spool: spoolDtoSchema.nullable(),
  blade: bladeDtoSchema.nullable(),
  run: runDtoSchema.nullable(),
  alarms: z.array(alarmDtoSchema),
});

/** Work that is on no rig, with the reason of the batch that is due first. */
export const waitingDtoSchema = z.object({
  lots: z.number().int(),
  pieces: z.number().int(),
  next: z
    .object({ batchId: z.uuid(), batchName: z.string(), dueAt: moment.nullable(), reason: z.string() })
    .nullable(),
});

export const floorDtoSchema = z.object({
  at: moment,
  rigs: z.array(rigDtoSchema),
  waiting: waitingDtoSchema,
});

/** The rig's page: the rig and what must be read before anything moves. */
export const rigPageDtoSchema = z.object({
  rig: rigDtoSchema,
  notes: z
    .object({ id: z.uuid(), version: z.number().int(), points: z.array(z.string()), fullText: z.string() })
    .nullable(),
  /** When this person last confirmed the full text in this shift and at this version; null: it must be read now. */
  fullReadAt: moment.nullable(),
  /** This person has confirmed the notes for the run that is on the rig. */
  acknowledged: z.boolean(),
  /** The bag before this one, for "the last bag … was confirmed at". */
  lastBag: z.object({ batchName: z.string(), lotNumber: z.number().int(), clearedAt: moment }).nullable(),
  log: z.array(z.object({ at: moment, kind: z.string(), text: z.string() })),
});

/** What the browser's one event stream carries; `at` is the server's time. */
export const liveMessageSchema = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('hello'), at: moment }),
  z.object({ kind: z.literal('tick'), at: moment }),
  z.object({ kind: z.literal('rig'), at: moment, rig: rigDtoSchema }),
  z.object({ kind: z.literal('batch'), at: moment, batchId: z.uuid() }),
  z.object({ kind: z.literal('waiting'), at: moment, waiting: waitingDtoSchema }),
  z.object({ kind: z.literal('session-ended'), at: moment }),
]);

/** The server sends a tick at least this often; a browser without one for twice as long says the link is lost. */
export const LIVE_TICK_MS = 1_500;

export type AlarmDto = z.infer<typeof alarmDtoSchema>;
export type RigDto = z.infer<typeof rigDtoSchema>;
export type FloorDto = z.infer<typeof floorDtoSchema>;
export type WaitingDto = z.infer<typeof waitingDtoSchema>;
export type RigPageDto = z.infer<typeof rigPageDtoSchema>;
export type LiveMessage = z.infer<typeof liveMessageSchema>;
