'use client';

import Link from 'next/link';
import { wallClock } from '@/components/live/time';
import { useRunAction } from '@/components/runs/use-run-action';
import { useLive } from '@/components/live/live-provider';
import { needsOf, type Need } from '@/lib/fleet/needs';
import { floorSentence } from '@/lib/fleet/sentence';
import { routes } from '@/lib/routes';
import type { RigDto, WaitingDto } from '@/lib/schemas/floor';

const MARKS: Record<Need['mark'], string> = {
  danger: 'hatch-signal',
  abnormal: 'hatch',
  normal: 'border border-ink',
};

/** One need: who goes where, with what; and, where it is an alarm, who is on it. */
function NeedLine({ need }: { need: Need }) {
  const acknowledge = useRunAction('acknowledgeAlarm');
  const { alarm } = need;
  return (
    <li className="flex min-h-11 break-inside-avoid flex-wrap items-center gap-x-3">
      <Link
        href={routes.rig(need.rigId)}
        className="grid min-h-11 grid-cols-[24px_auto] items-center gap-x-3 hover:underline"
      >
        <span aria-hidden className={`h-4 w-6 ${MARKS[need.mark]}`} />
        <span className="flex flex-wrap items-baseline gap-x-3">
          <span className="name">{need.rigName}</span>
          <span>{need.happened}</span>
          <span className="text-soft">{need.bring}</span>
        </span>
      </Link>
      {alarm?.byName ? <span className="text-soft">{alarm.byName} is on it</span> : null}
      {alarm && alarm.byName === null ? (
        <button
          type="button"
          className="min-h-11 px-2 underline"
          disabled={acknowledge.busy}
          onClick={() => void acknowledge.act({ alarmId: alarm.id })}
        >
          I am on it<span className="sr-only">: {need.rigName}</span>
        </button>
      ) : null}
    </li>
  );
}

/** The floor's first lines: what is to be done, then who must go where with what in hand. */
export function FloorHead({ rigs, waiting }: { rigs: RigDto[]; waiting: WaitingDto }) {
  const { nowMs, timeZone, lost } = useLive();
  const needs = needsOf(rigs);
  const alarms = needs.filter((need) => need.alarm !== null);
  const chances = needs.filter((need) => need.alarm === null);
  const sentence = floorSentence(rigs, needs, waiting, (at) => wallClock(at, timeZone, nowMs));
  return (
    <section aria-label="What is to be done" className="page pt-5 pb-4">
      <h1 className={`text-[25px] leading-snug font-normal ${lost ? 'text-soft' : ''}`}>
        {lost ? 'When last heard: ' : null}
        <strong>{sentence.urgent}</strong> {sentence.rest}
      </h1>
      <ul className="mt-2" aria-label="Who must go where">
        {alarms.map((need) => (
          <NeedLine key={need.key} need={need} />
        ))}
      </ul>
      <ul className={chances.length > 2 ? 'gap-x-8 lg:columns-2' : ''} aria-label="What can be done">
        {chances.map((need) => (
          <NeedLine key={need.key} need={need} />
        ))}
      </ul>
    </section>
  );
}
