'use client';

import { stateNow } from '@/components/live/freshness';
import { useLive } from '@/components/live/live-provider';
import { ageWords } from '@/components/live/time';
import { STATE_WORDS } from '@/lib/fleet/words';
import type { RigDto } from '@/lib/schemas/floor';

/** The rig's name, where it stands, what it is doing and how old that is. */
export function RigHead({ rig }: { rig: RigDto }) {
  const { nowMs, lost } = useLive();
  const state = lost ? 'silent' : stateNow(rig, nowMs);
  const words = STATE_WORDS[state];
  const heard =
    rig.heardAt === null
      ? 'agent never heard'
      : `agent heard ${ageWords(nowMs - Date.parse(rig.heardAt))} ago`;
  return (
    <div
      className="page flex flex-wrap items-baseline gap-x-5 border-b border-line py-4"
      data-rig-state={state}
    >
      <h1 className="name text-4xl">{rig.name}</h1>
      <p className="text-lg">
        <span className="text-soft">{rig.bay} · </span>
        <strong>{words.title}</strong>
        <span className="text-soft"> · {heard}</span>
      </p>
      <p className="grow text-right">
        {state === 'silent' && rig.heardAt !== null
          ? `Not heard for ${ageWords(nowMs - Date.parse(rig.heardAt))}; it may still be moving.`
          : words.sentence}
      </p>
    </div>
  );
}
