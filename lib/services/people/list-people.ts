import { asc } from 'drizzle-orm';
import { people } from '@/db/schema/people';
import type { PersonDto } from '@/lib/schemas/people';
import { authorise } from '../authorise';
import type { ServiceContext } from '../context';
import { personDto } from './person-dto';

/** Everybody, by name, the disabled ones too. */
export async function listPeople({ ctx }: { ctx: ServiceContext }): Promise<PersonDto[]> {
  authorise(ctx, 'people.write');
  const rows = await ctx.db.select().from(people).orderBy(asc(people.name), asc(people.email));
  return rows.map(personDto);
}
