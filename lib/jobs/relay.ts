import type { ServiceContext, SystemActor } from '@/lib/services/context';
import { listOpenOutbox } from '@/lib/services/outbox/list-open-outbox';
import { markRelayed } from '@/lib/services/outbox/mark-relayed';
import type { JobQueues } from './queues';

interface RelayOptions {
  context: () => ServiceContext<SystemActor>;
  queues: Pick<JobQueues, 'add'>;
  onFailed: (cause: unknown) => void;
}

/**
 * Hands every open outbox row to its queue. A row whose job is there already is not added twice (the job's id is the
 * row's), one whose job Redis forgot is added again: the same look serves news, a restart and an emptied Redis.
 */
export class Relay {
  #wanted = false;
  #running: Promise<void> | null = null;

  constructor(private readonly options: RelayOptions) {}

  /** Looks now, or once more after the look that is going on. Never rejects. */
  look(): Promise<void> {
    this.#wanted = true;
    this.#running ??= this.#run().finally(() => {
      this.#running = null;
    });
    return this.#running;
  }

  async #run(): Promise<void> {
    while (this.#wanted) {
      this.#wanted = false;
      try {
        await this.#relay();
      } catch (cause) {
        this.options.onFailed(cause);
      }
    }
  }

  async #relay(): Promise<void> {
    const { context, queues } = this.options;
    const rows = await listOpenOutbox({ ctx: context() });
    for (const { id, entry } of rows) await queues.add(entry.topic, id);
    await markRelayed({ ctx: context(), ids: rows.map((row) => row.id) });
  }
}
