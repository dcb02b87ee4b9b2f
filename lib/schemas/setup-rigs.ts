import { z } from 'zod';
import { profileFaults } from '@/lib/program/check-profile';
import { profileSchema } from '@/lib/program/profile';
import { bladeDtoSchema, spoolDtoSchema } from './stock';

const moment = z.iso.datetime();
const rigId = z.uuid('Pick a rig.');
const reason = z.string().trim().min(3, 'Say why, in a few words.').max(200, 'At most 200 characters.');

export const NOTES_POINTS_MAX = 8;

export const addRigSchema = z.object({
  name: z
    .string()
    .trim()
    .min(1, 'Give the rig a name.')
    .max(24, 'At most 24 characters: it stands on the rig’s display.')
    .regex(/^[\p{L}\p{N}][\p{L}\p{N} ._-]*$/u, 'Letters, digits, spaces, dots and hyphens only.'),
  bay: z.string().trim().max(40, 'At most 40 characters.').default(''),
  benchOrder: z
    .number('Enter its place along the bench.')
    .int('Enter a whole number.')
    .min(1, 'At least 1.')
    .max(999, 'At most 999.'),
});

/** A profile that a rig can be run by; an older one that is not stays readable. */
const soundProfileSchema = profileSchema.superRefine((profile, ctx) => {
  for (const { path, message } of profileFaults(profile)) ctx.addIssue({ code: 'custom', path, message });
});

export const publishProfileSchema = z.object({ rigId, profile: soundProfileSchema, reason });
export const publishNotesSchema = z.object({
  rigId,
  points: z
    .array(
      z.string().trim().min(1, 'Write the point or take the line away.').max(160, 'At most 160 characters.'),
    )
    .min(1, 'Write at least one point.')
    .max(NOTES_POINTS_MAX, `At most ${NOTES_POINTS_MAX} points: more are not read.`),
  fullText: z
    .string()
    .trim()
    .min(40, 'Write the full notes; at least 40 characters.')
    .max(20_000, 'At most 20,000 characters.'),
});
export const takeOutOfServiceSchema = z.object({ rigId, reason });
export const rigIdSchema = z.object({ rigId });

/** A row of the set-up list. */
export const rigSetupDtoSchema = z.object({
  id: z.uuid(),
  name: z.string(),
  bay: z.string(),
  benchOrder: z.number().int(),
  agentId: z.uuid().nullable(),
  agentName: z.string().nullable(),
  profileVersion: z.number().int().nullable(),
  notesVersion: z.number().int().nullable(),
  spool: spoolDtoSchema.nullable(),
  blade: bladeDtoSchema.nullable(),
  outOfServiceReason: z.string().nullable(),
});

export const rigSetupPageDtoSchema = z.object({
  rig: rigSetupDtoSchema,
  profile: profileSchema.nullable(),
  notes: z.object({ points: z.array(z.string()), fullText: z.string() }).nullable(),
  profileHistory: z.array(
    z.object({ version: z.number().int(), reason: z.string(), byName: z.string(), at: moment }),
  ),
});

export type RigSetupDto = z.infer<typeof rigSetupDtoSchema>;
export type RigSetupPageDto = z.infer<typeof rigSetupPageDtoSchema>;
