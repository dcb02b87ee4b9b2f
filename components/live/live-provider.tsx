'use client';

import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { createContext, useContext, useEffect, useMemo, useState, type ReactNode } from 'react';
import { LIVE_TICK_MS } from '@/lib/schemas/floor';
import { routes } from '@/lib/routes';
import { applyLive } from './apply-live';
import { openLiveLink } from './live-link';

const LOOK_MS = 250;

interface Live {
  /** The server's time, in ms, told once a second. */
  nowMs: number;
  /** No word from the server for twice its tick: what is shown is old. */
  lost: boolean;
  /** The server was heard at least once since the page was opened. */
  joined: boolean;
  /** The workshop's time zone. */
  timeZone: string;
}

const LiveContext = createContext<Live | null>(null);

/** The live state of the page. @throws Error outside a `LiveProvider`. */
export function useLive(): Live {
  const live = useContext(LiveContext);
  if (!live) throw new Error('useLive needs a LiveProvider above it');
  return live;
}

/** Follows the server's clock and the state of the link; ticks once a second. */
function useLink(client: QueryClient, serverAt: string): Omit<Live, 'timeZone'> {
  const [clock, setClock] = useState({ nowMs: Date.parse(serverAt), lost: false, joined: false });
  useEffect(() => {
    let skewMs = Date.parse(serverAt) - Date.now();
    let heardMs = Date.now();
    let joined = false;
    const link = openLiveLink((message) => {
      heardMs = Date.now();
      joined = true;
      skewMs = Date.parse(message.at) - heardMs;
      if (message.kind === 'session-ended') window.location.assign(routes.signIn());
      else applyLive(client, message);
    });
    // Looked at more often than it is told, or a lost link would be told up to a second late.
    const timer = setInterval(() => {
      const nowMs = Date.now() + skewMs;
      const lost = Date.now() - heardMs > LIVE_TICK_MS * 2;
      setClock((old) => {
        const changed = lost !== old.lost || joined !== old.joined;
        return changed || Math.abs(nowMs - old.nowMs) >= 1_000 ? { nowMs, lost, joined } : old;
      });
    }, LOOK_MS);
    return () => {
      clearInterval(timer);
      link.close();
    };
  }, [client, serverAt]);
  return clock;
}

interface LiveProviderProps {
  timeZone: string;
  /** The server's time when the page was made. */
  serverAt: string;
  children: ReactNode;
}

/** Queries and the event stream for everything below. */
export function LiveProvider({ timeZone, serverAt, children }: LiveProviderProps) {
  const [client] = useState(
    () => new QueryClient({ defaultOptions: { queries: { staleTime: 5_000, retry: 1 } } }),
  );
  const link = useLink(client, serverAt);
  const live = useMemo(() => ({ ...link, timeZone }), [link, timeZone]);
  return (
    <QueryClientProvider client={client}>
      <LiveContext value={live}>{children}</LiveContext>
    </QueryClientProvider>
  );
}
