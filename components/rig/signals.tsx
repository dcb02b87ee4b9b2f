'use client';

import { useLive } from '@/components/live/live-provider';
import { ageWords } from '@/components/live/time';
import { guardWords } from '@/lib/program/guard';
import type { RigDto } from '@/lib/schemas/floor';

/** A reading older than this is shown as old, never as fact. */
const READING_OLD_MS = 5_000;

interface Row {
  name: string;
  words: string;
  readAt: string | null;
  abnormal: boolean;
  /** What it can and cannot do, beneath it. */
  limits?: string;
}

function guardRow({ signals, fitted, guardDelayS }: RigDto): Row {
  const guard = signals?.guard ?? { reading: 'unknown' as const };
  const limits = fitted ? guardWords(guardDelayS) : undefined;
  const power = fitted?.guardCutsMotorPower ? ', wired to cut motor power' : ', not wired to motor power';
  const name = 'Guard';
  switch (guard.reading) {
    case 'closed':
      return { name, words: `closed${power}`, readAt: guard.readAt, abnormal: false, limits };
    case 'open':
      return { name, words: `open${power}`, readAt: guard.readAt, abnormal: true, limits };
    case 'unknown':
      return { name, words: 'not read: look at the guard', readAt: null, abnormal: true, limits };
    default:
      return { name, words: 'no switch fitted: look that it is shut', readAt: null, abnormal: false, limits };
  }
}

function wireRow({ signals }: RigDto): Row {
  const wire = signals?.wire ?? { reading: 'unknown' as const };
  const name = 'Wire at the guide';
  switch (wire.reading) {
    case 'present':
      return { name, words: 'present', readAt: wire.readAt, abnormal: false };
    case 'missing':
      return { name, words: 'missing: thread it in', readAt: wire.readAt, abnormal: true };
    case 'unknown':
      return { name, words: 'not read: look at the guide', readAt: null, abnormal: true };
    default:
      return { name, words: 'no switch fitted: look', readAt: null, abnormal: false };
  }
}

function heaterRow({ signals }: RigDto): Row {
  const heater = signals?.heater ?? { reading: 'unknown' as const };
  const name = 'Heater';
  switch (heater.reading) {
    case 'off':
      return { name, words: `off, ${Math.round(heater.actualC)} °C`, readAt: heater.readAt, abnormal: false };
    case 'on':
    case 'warm':
      return {
        name,
        words: `${heater.reading}, ${Math.round(heater.actualC)} °C`,
        readAt: heater.readAt,
        abnormal: true,
      };
    case 'unknown':
      return { name, words: 'not read: feel for warmth without touching', readAt: null, abnormal: true };
    default:
      return { name, words: 'none fitted: look that nothing is heated', readAt: null, abnormal: false };
  }
}

function hardwareStopRow({ fitted }: RigDto): Row {
  return {
    name: 'Hardware stop',
    words: fitted?.hardwareStop
      ? 'fitted; this screen cannot read it: try it'
      : 'not fitted: the plug is the stop, keep it in reach',
    readAt: null,
    abnormal: false,
  };
}

/** What the rig itself says, with its age; what it does not have is said as such, never as good. */
export function Signals({ rig }: { rig: RigDto }) {
  const { nowMs, lost } = useLive();
  const rows = [guardRow(rig), wireRow(rig), heaterRow(rig), hardwareStopRow(rig)];
  return (
    <section aria-labelledby="signals">
      <h2 id="signals" className="border-b border-line pb-2 text-xl">
        Signals from the rig
      </h2>
      <ul>
        {rows.map((row) => {
          const ageMs = row.readAt === null ? null : nowMs - Date.parse(row.readAt);
          const old = ageMs !== null && (lost || ageMs > READING_OLD_MS);
          return (
            <li key={row.name} className="flex items-baseline gap-3 border-b border-line py-2.5">
              {row.abnormal ? (
                <span aria-hidden className="hatch-signal h-4 w-6 shrink-0 self-center" />
              ) : null}
              <span className="grow">
                <strong>{row.name}</strong>{' '}
                <span className={old ? 'text-soft line-through' : ''}>{row.words}</span>
                {row.limits ? <span className="block text-soft">{row.limits}</span> : null}
              </span>
              <span className="shrink-0 text-soft">
                {ageMs === null ? '–' : `${old ? 'old, ' : ''}${ageWords(ageMs)} ago`}
              </span>
            </li>
          );
        })}
      </ul>
    </section>
  );
}
