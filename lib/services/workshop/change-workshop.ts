import { workshop } from '@/db/schema/workshop';
import { workshopSchema, type WorkshopDto } from '@/lib/schemas/setup-workshop';
import { audit } from '../audit';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { parseInput } from '../parse';
import { inTransaction } from '../transaction';

/** Replaces the workshop's settings. Lots that are queued already keep their size. */
export async function changeWorkshop({
  ctx,
  input,
}: {
  ctx: ServiceContext;
  input: unknown;
}): Promise<WorkshopDto> {
  authorise(ctx, 'workshop.write');
  const settings = parseInput(workshopSchema, input);
  return inTransaction(ctx, async (inner) => {
    await inner.db
      .insert(workshop)
      .values({ id: 1, ...settings })
      .onConflictDoUpdate({ target: workshop.id, set: settings });
    await audit(inner, 'workshop.change', 'workshop', { ...settings });
    return settings;
  });
}
