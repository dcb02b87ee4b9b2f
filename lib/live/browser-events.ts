import type { LiveMessage } from '@/lib/schemas/floor';
import { Outlet } from './outlet';

/** Who reads a browser's stream. `stands` asks the database whether the session is still good. */
export interface BrowserSource {
  personId: string;
  stands: () => Promise<boolean>;
  onFailed: (cause: unknown) => void;
}

/** A message as server-sent event; made once for all readers. */
export function asEvent(message: LiveMessage): string {
  return `data: ${JSON.stringify(message)}\n\n`;
}

/** One browser's event stream. */
export class BrowserEvents {
  readonly outlet = new Outlet();

  constructor(private readonly source: BrowserSource) {}

  get personId(): string {
    return this.source.personId;
  }

  /** Ends the stream with a word when the session is over. */
  async recheck(at: string): Promise<void> {
    try {
      if (await this.source.stands()) return;
      this.outlet.write(asEvent({ kind: 'session-ended', at }));
    } catch (cause) {
      this.source.onFailed(cause);
    }
    this.outlet.close();
  }
}
