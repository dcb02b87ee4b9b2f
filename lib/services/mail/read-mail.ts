import { eq } from 'drizzle-orm';
import { outbox } from '@/db/schema/traffic';
import { people } from '@/db/schema/people';
import { outboxSchema } from '@/lib/schemas/outbox';
import { authoriseSystem } from '../authorise';
import type { ServiceContext } from '../context';
import { readWorkshop } from '../workshop/read-workshop';

export interface MailToSend {
  to: string;
  subject: string;
  text: string;
}

/** The mail that an outbox row asks for; null when its person is gone or disabled by now. */
export async function readMail({
  ctx,
  outboxId,
}: {
  ctx: ServiceContext;
  outboxId: number;
}): Promise<MailToSend | null> {
  authoriseSystem(ctx);
  const [row] = await ctx.db.select().from(outbox).where(eq(outbox.id, outboxId));
  const entry = outboxSchema.safeParse({ topic: row?.topic, payload: row?.payload });
  if (!entry.success || entry.data.topic !== 'mail') return null;
  const [person] = await ctx.db.select().from(people).where(eq(people.id, entry.data.payload.personId));
  if (!person || person.disabledAt) return null;
  const { name: workshopName } = await readWorkshop({ ctx });
  return {
    to: person.email,
    subject: `You can sign in to Ellwand at ${workshopName}`,
    text: [
      `Hello ${person.name},`,
      '',
      `you were added to Ellwand at ${workshopName} as ${person.roles.join(', ')}.`,
      `Sign in with ${person.email} and the password that the owner tells you.`,
      '',
      'Before you start a rig: read its interlock notes, and ask a qualified person to show you the hardware stop.',
    ].join('\n'),
  };
}
