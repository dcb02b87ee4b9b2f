'use client';

import { Rule } from '@/components/ui/rule';
import { WireLine } from '@/components/ui/wire-line';
import { useLive } from '@/components/live/live-provider';
import { wallClock } from '@/components/live/time';
import type { RigDto } from '@/lib/schemas/floor';
import { fullWireName, wireName } from '@/lib/wire/name';
import { Fact, Facts } from './facts';
import { durationWords, lotTitle, metres, toleranceWords } from './words';

function SpoolWords({ rig }: { rig: RigDto }) {
  const { spool, run } = rig;
  if (!spool) return <>none loaded</>;
  const needed = run ? `, ${metres(run.wireNeededMm)} needed` : '';
  const wrong = run && spool.wire.id !== run.wire.id;
  return (
    <>
      {spool.label}, about {metres(spool.leftMm)} left{needed}
      {wrong ? (
        <strong className="block text-signal">
          holds {wireName(spool.wire)}, the lot needs {wireName(run.wire)}
        </strong>
      ) : null}
    </>
  );
}

/** The lot on the rig: the pieces on a rule, and the facts that an operator checks. */
export function LotFacts({ rig }: { rig: RigDto }) {
  const { nowMs, timeZone } = useLive();
  const { run } = rig;
  return (
    <section aria-labelledby="lot">
      <h2 id="lot" className="text-xl">
        {lotTitle(rig)}
      </h2>
      {run ? (
        <>
          <div className="my-3 border-l-2 border-ink pt-2" aria-hidden>
            <WireLine colour={run.wire.colour} ratio={run.cut / run.pieces} />
            <Rule max={run.pieces} labelsMost={5} />
          </div>
          <Facts>
            <Fact name="Pieces" strong>
              {run.pieces} × {run.lengthMm} mm
            </Fact>
            <Fact name="Tolerance">{toleranceWords(run.toleranceMinusMm, run.tolerancePlusMm)}</Fact>
            <Fact name="Wire">{fullWireName(run.wire)}</Fact>
            <Fact name="Spool">
              <SpoolWords rig={rig} />
            </Fact>
            <Fact name="Takes">
              {durationWords(run.expectedS)}
              {run.firstPieces > 0 ? `, once the first ${run.firstPieces} are measured` : ''}
            </Fact>
            {run.batchDueAt ? <Fact name="Due">{wallClock(run.batchDueAt, timeZone, nowMs)}</Fact> : null}
            <Fact name="Blade">
              {rig.blade ? `${rig.blade.label}, ${rig.blade.cuts} cuts so far` : 'none entered'}
            </Fact>
          </Facts>
        </>
      ) : (
        <Facts>
          <Fact name="Spool">
            <SpoolWords rig={rig} />
          </Fact>
          <Fact name="Blade">
            {rig.blade ? `${rig.blade.label}, ${rig.blade.cuts} cuts so far` : 'none entered'}
          </Fact>
        </Facts>
      )}
    </section>
  );
}
