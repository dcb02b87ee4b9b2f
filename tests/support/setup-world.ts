import { drizzle } from 'drizzle-orm/node-postgres';
import type { Database } from '@/db/client';
import type { Role } from '@/lib/fleet/rights';
import type { PersonActor, ServiceContext } from '@/lib/services/context';
import { addPerson } from '@/lib/services/people/add-person';
import { createFirstOwner } from '@/lib/services/people/create-first-owner';
import { openTestDatabase } from '@/tests/support/database';

export const PASSWORD = 'twelve brass posts';
export const NOW = new Date('2026-12-01T08:00:00Z');

export interface World {
  db: Database;
  url: string;
  query: <Row extends object>(sql: string, values?: unknown[]) => Promise<Row[]>;
  /** The context of a person with exactly these roles, made when first asked for. */
  as: (...roles: Role[]) => Promise<ServiceContext<PersonActor>>;
  system: (now?: Date) => ServiceContext;
  close: () => Promise<void>;
}

/** A workshop with its first owner on a database of its own. */
export async function openWorld(): Promise<World> {
  const database = await openTestDatabase();
  const db = drizzle(database.pool, { casing: 'snake_case' });
  const system = (now = NOW): ServiceContext => ({
    actor: { kind: 'system' },
    db,
    now,
    requestId: 'test',
  });
  const input = { workshopName: 'Test', name: 'Owner', email: 'owner@test.example', password: PASSWORD };
  const first = await createFirstOwner({ ctx: system(), input });
  const known = new Map<string, ServiceContext<PersonActor>>();
  const contextOf = (personId: string, roles: Role[]): ServiceContext<PersonActor> => ({
    ...system(),
    actor: { kind: 'person', personId, name: roles.join(' '), roles },
  });
  known.set('owner', contextOf(first.id, ['owner']));
  const as = async (...roles: Role[]) => {
    const key = roles.join('-');
    const made = known.get(key);
    if (made) return made;
    const ctx = await as('owner');
    const person = { name: key, email: `${key}@test.example`, roles, password: PASSWORD };
    const added = contextOf((await addPerson({ ctx, input: person })).id, roles);
    known.set(key, added);
    return added;
  };
  return {
    db,
    url: database.url,
    query: async <Row extends object>(sql: string, values: unknown[] = []) =>
      (await database.pool.query<Row>(sql, values)).rows,
    as,
    system,
    close: () => database.close(),
  };
}
