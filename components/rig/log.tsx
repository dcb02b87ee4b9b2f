'use client';

import { useLive } from '@/components/live/live-provider';
import { wallClock } from '@/components/live/time';
import type { RigPageDto } from '@/lib/schemas/floor';

/** The rig's log, newest first; the firmware's own words stay here and nowhere else. */
export function Log({ page }: { page: RigPageDto }) {
  const { nowMs, timeZone } = useLive();
  if (page.log.length === 0) return null;
  return (
    <details className="page border-t border-line py-3">
      <summary className="flex min-h-11 items-center text-soft underline">Log of {page.rig.name}</summary>
      <ol className="font-mono text-sm">
        {page.log.map((entry, index) => (
          <li key={`${entry.at} ${index}`} className="flex gap-4 border-b border-line py-1">
            <time dateTime={entry.at} className="w-36 shrink-0 text-soft">
              {wallClock(entry.at, timeZone, nowMs)}
            </time>
            <span className="w-36 shrink-0">{entry.kind}</span>
            <span className="break-all">{entry.text}</span>
          </li>
        ))}
      </ol>
    </details>
  );
}
