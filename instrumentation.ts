import { stampPeerAddresses } from '@/lib/auth/peer-address';
import { closeLiveHub } from '@/lib/live/web-hub';

/** Whoever still reads by then reads no more: an open stream must not hold the process. */
const LAST_MOMENT_MS = 5_000;

/** Called by the framework once, before the first request. */
export function register(): void {
  stampPeerAddresses();
  process.once('SIGTERM', () => {
    closeLiveHub();
    setTimeout(() => process.exit(0), LAST_MOMENT_MS).unref();
  });
}
