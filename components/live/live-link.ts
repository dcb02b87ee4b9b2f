import { LIVE_TICK_MS, liveMessageSchema, type LiveMessage } from '@/lib/schemas/floor';

const CHANNEL = 'ellwand-live';
const LOCK = 'ellwand-live-stream';
const RETRY_MS = 1_000;

interface LiveLink {
  close(): void;
}

function parse(text: string): LiveMessage | null {
  try {
    const parsed = liveMessageSchema.safeParse(JSON.parse(text));
    return parsed.success ? parsed.data : null;
  } catch {
    return null;
  }
}

/** A refused stream of a session that is over: said as the stream would have said it. */
async function tellWhenSignedOut(onText: (text: string) => void): Promise<void> {
  const answer = await fetch('/api/floor', { method: 'HEAD' }).catch(() => undefined);
  const ended: LiveMessage = { kind: 'session-ended', at: new Date().toISOString() };
  if (answer?.status === 401) onText(JSON.stringify(ended));
}

/** Keeps one event stream open and opens it anew when it ends or falls silent, until `signal` aborts. */
function holdStream(onText: (text: string) => void, signal: AbortSignal): Promise<void> {
  // The lock may be granted just after its page gave up; it must be let go at once for the next one.
  if (signal.aborted) return Promise.resolve();
  return new Promise((resolve) => {
    let source: EventSource | null = null;
    let watchdog: ReturnType<typeof setTimeout> | undefined;
    let retry: ReturnType<typeof setTimeout> | undefined;
    const again = () => {
      source?.close();
      clearTimeout(watchdog);
      clearTimeout(retry);
      retry = setTimeout(open, RETRY_MS);
    };
    const guard = () => {
      clearTimeout(watchdog);
      watchdog = setTimeout(again, LIVE_TICK_MS * 2);
    };
    const open = () => {
      source = new EventSource('/api/live');
      guard();
      source.onmessage = (event: MessageEvent<string>) => {
        guard();
        onText(event.data);
      };
      source.onerror = () => {
        // A network error leaves it connecting; closed means that the server refused it.
        if (source?.readyState === EventSource.CLOSED) void tellWhenSignedOut(onText);
        again();
      };
    };
    signal.addEventListener('abort', () => {
      source?.close();
      clearTimeout(watchdog);
      clearTimeout(retry);
      resolve();
    });
    open();
  });
}

/**
 * One event stream for all tabs of a browser (six connections to a host are all it has): the tab that holds the lock
 * reads the stream and passes each message on; when it closes, the next one takes over.
 */
export function openLiveLink(onMessage: (message: LiveMessage) => void): LiveLink {
  const channel = new BroadcastChannel(CHANNEL);
  const abort = new AbortController();
  const take = (text: string) => {
    const message = parse(text);
    if (message) onMessage(message);
  };
  channel.onmessage = (event: MessageEvent<string>) => take(event.data);
  const lead = () =>
    holdStream((text) => {
      take(text);
      channel.postMessage(text);
    }, abort.signal);
  navigator.locks.request(LOCK, { signal: abort.signal }, lead).catch((error: unknown) => {
    if (!abort.signal.aborted) console.error('the event stream could not be opened', error);
  });
  return {
    close() {
      abort.abort();
      channel.close();
    },
  };
}
