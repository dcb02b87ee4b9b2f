import { systemContext } from '@/lib/auth/context';
import { webEnv } from '@/lib/env/web';
import { STREAM_PING_MS } from '@/lib/protocol/version';
import { LIVE_TICK_MS } from '@/lib/schemas/floor';
import { readLiveRigs } from '@/lib/services/floor/read-live-rigs';
import { readLiveWaiting } from '@/lib/services/floor/read-live-waiting';
import { followNews } from '@/lib/services/news/follow-news';
import { LiveHub } from './hub';

interface Running {
  hub: LiveHub;
  close: () => void;
}

/** The framework bundles routes and start-up apart, each with modules of its own: the one hub hangs on the process. */
const KEY = Symbol.for('ellwand.live-hub');
const shared = globalThis as typeof globalThis & { [KEY]?: Running };

function start(): Running {
  const onFailed = (cause: unknown) => console.error('Live news:', cause);
  const hub = new LiveHub({
    readRigs: (rigIds) => readLiveRigs({ ctx: systemContext(), rigIds }),
    readWaiting: () => readLiveWaiting({ ctx: systemContext() }),
    nowMs: () => Date.now(),
    onFailed,
  });
  const closing = new AbortController();
  const ticks = setInterval(() => hub.tick(), Math.min(LIVE_TICK_MS, STREAM_PING_MS));
  void followNews({
    ctx: { actor: { kind: 'system' } },
    databaseUrl: webEnv().databaseUrl,
    closing: closing.signal,
    follower: {
      onNews: (news) => hub.take(news),
      onConnected: () => hub.refresh(),
      onLost: onFailed,
    },
  });
  const close = () => {
    clearInterval(ticks);
    closing.abort();
    hub.close();
  };
  return { hub, close };
}

/** The web process's one hub, listening from its first use on. */
export function liveHub(): LiveHub {
  shared[KEY] ??= start();
  return shared[KEY].hub;
}

/** Ends all streams of this process, so that it may go; later ones are refused. */
export function closeLiveHub(): void {
  shared[KEY]?.close();
}
