import type { Log } from '@/agent/log';
import type { Notice, Say } from '@/agent/uplink/notices';

/** One part of the talk with the server that does not work now. */
export type LinkTrouble = Pick<Notice, 'topic' | 'text'> & { code: string };

/** Remembers what about the server link does not work, for whoever asks, and logs each change. */
export interface LinkBook {
  note: Say;
  readonly troubles: LinkTrouble[];
}

export function createLinkBook(log: Log): LinkBook {
  const troubles = new Map<Notice['topic'], LinkTrouble>();
  return {
    note({ topic, code, text }) {
      if (code === null) troubles.delete(topic);
      else troubles.set(topic, { topic, code, text });
      const message = `${topic}: ${text}`;
      log({ level: code === null ? 'info' : 'warning', code: code ?? 'link-works', message });
    },
    get troubles() {
      return [...troubles.values()];
    },
  };
}
