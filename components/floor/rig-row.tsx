'use client';

import { LinkButton } from '@/components/ui/button';
import { WireSwatch } from '@/components/ui/wire-swatch';
import { stateNow } from '@/components/live/freshness';
import { useLive } from '@/components/live/live-provider';
import { ageWords, wallClock } from '@/components/live/time';
import { lotName } from '@/lib/fleet/lot-name';
import { HOLD_WORDS, STATE_WORDS } from '@/lib/fleet/words';
import type { RigState } from '@/lib/fleet/rig-state';
import { routes } from '@/lib/routes';
import type { RigDto } from '@/lib/schemas/floor';
import { RigAct } from './rig-act';
import { Strip } from './strip';

const HATCHED: Partial<Record<RigState, string>> = {
  blocked: 'hatch-signal',
  silent: 'hatch-signal',
  held: 'hatch',
  'tray full': 'hatch',
};

function stateTitle(rig: RigDto, state: RigState): string {
  const title = STATE_WORDS[state].title;
  if (state === 'held' && rig.run?.holdReason) return `${title}: ${HOLD_WORDS[rig.run.holdReason].title}`;
  if (state === 'blocked') return `${title}: guard open`;
  return title;
}

function stateDetail(rig: RigDto, state: RigState, nowMs: number, clock: (at: string) => string): string {
  if (state === 'silent') {
    return rig.heardAt === null
      ? 'never heard'
      : `not heard for ${ageWords(nowMs - Date.parse(rig.heardAt))}; it may still be moving`;
  }
  if (state === 'work hold' && rig.workHold) {
    return `${rig.workHold.personName}, hands in since ${clock(rig.workHold.beganAt)}`;
  }
  return rig.outOfServiceReason ?? '';
}

function tail(rig: RigDto, state: RigState, nowMs: number, clock: (at: string) => string): string {
  const run = rig.run;
  if (!run) return '';
  if (state === 'cutting') return run.expectedEndAt ? ` · ${clock(run.expectedEndAt)}` : '';
  if (state === 'ready') return run.programHeld ? ' · ready to start' : ' · program on its way';
  return ` · since ${ageWords(nowMs - Date.parse(run.stateSince))}`;
}

/** One rig of the floor: who it is, the strip, what may be done. */
export function RigRow({ rig }: { rig: RigDto }) {
  const { nowMs, lost, timeZone } = useLive();
  const state = lost ? 'silent' : stateNow(rig, nowMs);
  const clock = (at: string) => wallClock(at, timeZone, nowMs);
  const detail = stateDetail(rig, state, nowMs, clock);
  const { run, spool } = rig;
  return (
    <li
      data-rig={rig.name}
      data-state={state}
      className="relative grid grid-cols-[minmax(170px,230px)_1fr_minmax(150px,200px)] items-center gap-x-6 border-t border-line py-2 page"
    >
      {HATCHED[state] ? (
        <span aria-hidden className={`absolute inset-y-0 left-0 w-3.5 ${HATCHED[state]}`} />
      ) : null}
      <div className="min-w-0 leading-snug">
        <h2 className="text-xl">
          <a href={routes.rig(rig.id)} className="name hover:underline">
            {rig.name}
          </a>{' '}
          <span className="font-sans text-base font-normal text-soft">{rig.bay}</span>
        </h2>
        <p>
          <strong>{stateTitle(rig, state)}</strong>{' '}
          {detail ? <span className="text-soft">{detail}</span> : null}
        </p>
        <p className="text-soft">{spool ? <WireSwatch wire={spool.wire} /> : 'no spool'}</p>
      </div>
      <div className="min-w-0">
        <div className="flex justify-between gap-4">
          <p className="truncate">
            {run ? `${lotName(run)} · ${run.lengthMm} mm` : <span className="text-soft">no lot</span>}
          </p>
          {run ? (
            <p className="text-soft whitespace-nowrap" data-count={run.cut}>
              <span className="figure text-lg text-ink">{run.cut}</span> of {run.pieces}
              {tail(rig, state, nowMs, clock)}
            </p>
          ) : null}
        </div>
        <Strip
          colour={spool?.wire.colour ?? null}
          spoolFill={spool ? spool.leftMm / spool.lengthMm : 0}
          pieces={run?.pieces ?? 0}
          cut={run?.cut ?? 0}
          tray={run?.bagged ?? 0}
          stale={state === 'silent'}
        />
      </div>
      <RigAct
        rig={rig}
        state={state}
        fallback={
          <LinkButton href={routes.rig(rig.id)} size="rig" className="w-full">
            Open {rig.name}
          </LinkButton>
        }
      />
    </li>
  );
}
