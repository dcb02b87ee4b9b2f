import { addBlade } from '@/lib/services/blades/add-blade';
import { fitBlade } from '@/lib/services/blades/fit-blade';
import { addRig } from '@/lib/services/rigs/add-rig';
import { publishNotes } from '@/lib/services/rigs/publish-notes';
import { publishProfile } from '@/lib/services/rigs/publish-profile';
import { loadSpool } from '@/lib/services/spools/load-spool';
import type { DemoContexts } from './demo-contexts';
import { NOTES_FULL_TEXT, NOTES_POINTS } from './demo/notes';
import type { DemoRig } from './demo/rigs';
import { BLADE_MODEL } from './demo/stock';

/** One rig with profile, notes, blade and spool. Answers its id. */
export async function makeDemoRig(
  as: DemoContexts,
  rig: DemoRig,
  { benchOrder, spoolId }: { benchOrder: number; spoolId: string | null },
): Promise<string> {
  const { owner, maintainer, operator } = as;
  const { id: rigId } = await addRig({ ctx: owner, input: { name: rig.name, bay: rig.bay, benchOrder } });
  const profile = { rigId, profile: rig.profile, reason: 'First set-up.' };
  await publishProfile({ ctx: maintainer, input: profile });
  const notes = { rigId, points: NOTES_POINTS, fullText: NOTES_FULL_TEXT };
  await publishNotes({ ctx: maintainer, input: notes });
  const blade = await addBlade({ ctx: maintainer, input: { label: rig.bladeLabel, model: BLADE_MODEL } });
  await fitBlade({ ctx: maintainer, input: { bladeId: blade.id, rigId } });
  await loadSpool({ ctx: operator, input: { rigId, spoolId } });
  return rigId;
}
