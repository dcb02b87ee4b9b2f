import { randomUUID } from 'node:crypto';
import type { Db } from '@/db/client';
import type { ServiceContext } from '@/lib/services/context';
import { lockEmptyWorkshop } from '@/lib/services/people/workshop-is-empty';
import { inTransaction } from '@/lib/services/transaction';
import { makeDemoWorkshop } from './demo-workshop';
import { DEMO_PEOPLE, makeDemoPassword } from './demo/people';
import { refreshDemoFiles, writeDemoFiles, type DemoPlace } from './files';

/**
 * Fills an empty database with the demo workshop, all or nothing, and leaves its accounts and configurations in
 * `<dataDir>/demo`. A workshop that has people is left as it is. Answers whether it was filled.
 */
export async function seedDemo(db: Db, place: DemoPlace, now: Date): Promise<boolean> {
  const ctx: ServiceContext = { actor: { kind: 'system' }, db, now, requestId: `seed-${randomUUID()}` };
  const filled = await inTransaction(ctx, async (inner) => {
    if (!(await lockEmptyWorkshop(inner))) return false;
    const password = makeDemoPassword();
    const codes = await makeDemoWorkshop(inner, password);
    const accounts = DEMO_PEOPLE.map(({ name, email, role }) => ({ name, email, roles: [role] }));
    // Before the commit: a password that was stored and never told would lock everybody out.
    writeDemoFiles(place, { password, accounts }, codes);
    return true;
  });
  if (!filled) refreshDemoFiles(place);
  return filled;
}
