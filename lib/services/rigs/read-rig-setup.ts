import { desc, eq } from 'drizzle-orm';
import { people } from '@/db/schema/people';
import { interlockNotes, profiles } from '@/db/schema/rigs';
import { EllwandError } from '@/lib/errors';
import { rigIdSchema, type RigSetupPageDto } from '@/lib/schemas/setup-rigs';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { listRigsForSetup } from './list-rigs-for-setup';

/** One rig's set-up in full: the profile and notes in force, and who changed the profile when. @throws `not-found` */
export async function readRigSetup({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<RigSetupPageDto> {
  const { rigId } = parseInput(rigIdSchema, input);
  const [rig] = await listRigsForSetup({ ctx, rigId });
  if (!rig) throw new EllwandError('not-found');
  const versions = await ctx.db
    .select({ row: profiles, byName: people.name })
    .from(profiles)
    .innerJoin(people, eq(people.id, profiles.createdBy))
    .where(eq(profiles.rigId, rigId))
    .orderBy(desc(profiles.version));
  const [notes] = await ctx.db
    .select({ points: interlockNotes.points, fullText: interlockNotes.fullText })
    .from(interlockNotes)
    .where(eq(interlockNotes.rigId, rigId))
    .orderBy(desc(interlockNotes.version))
    .limit(1);
  return {
    rig,
    profile: versions[0]?.row.profile ?? null,
    notes: notes ?? null,
    profileHistory: versions.map(({ row, byName }) => ({
      version: row.version,
      reason: row.reason,
      byName,
      at: row.createdAt.toISOString(),
    })),
  };
}
