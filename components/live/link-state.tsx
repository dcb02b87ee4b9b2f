'use client';

import { Notice } from '@/components/ui/notice';
import { useLive } from './live-provider';

/** One word in the head: whether what is shown follows the workshop. */
export function LinkWord() {
  const { lost, joined } = useLive();
  if (lost) return <span>not live</span>;
  return <span>{joined ? 'live' : 'joining'}</span>;
}

/** Across the page while the server is not heard: what is shown is old, and where the stop is. */
export function LinkLost() {
  const { lost } = useLive();
  return lost ? (
    <Notice title="The link to Ellwand is lost. What you see is old." danger>
      <p>
        Rigs go on by themselves. To stop one, use its hardware stop or the stop command at its own computer.
      </p>
    </Notice>
  ) : null;
}
