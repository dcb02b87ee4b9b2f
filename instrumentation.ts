import { stampPeerAddresses } from '@/lib/auth/peer-address';

/** Called by the framework once, before the first request. */
export function register(): void {
  stampPeerAddresses();
}
