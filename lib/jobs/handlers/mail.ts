import { readMail } from '@/lib/services/mail/read-mail';
import { withClaim } from '@/lib/services/outbox/with-claim';
import { JOBS } from '../definitions';
import type { JobHandler } from './handler';

/**
 * Sends one mail inside the claim's transaction: a refused mail leaves its row open. A crash between sending and
 * committing sends it twice, which is better than never.
 */
export const handleMail: JobHandler = async ({ ctx, payload, post }) => {
  const { outboxId } = JOBS.mail.payload.parse(payload);
  await withClaim({
    ctx,
    id: outboxId,
    work: async (inner) => {
      const mail = await readMail({ ctx: inner, outboxId });
      if (mail) await post.send(mail);
    },
  });
};
