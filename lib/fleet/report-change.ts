import type { RigReport } from '@/lib/protocol/report';
import type { Signals } from '@/lib/protocol/signals';

/** A moment of the agent's clock on the server's. `skewMs` = server's clock less the agent's. */
function shifted(at: string, skewMs: number): string {
  return new Date(Date.parse(at) + skewMs).toISOString();
}

function signalOnClock<S extends Signals[keyof Signals]>(signal: S, skewMs: number): S {
  return 'readAt' in signal ? { ...signal, readAt: shifted(signal.readAt, skewMs) } : signal;
}

/** The report with its readings' times on the server's clock, so that their age can be told whatever the agent's says. */
export function onServerClock(report: RigReport, skewMs: number): RigReport {
  const { guard, wire, heater } = report.signals;
  return {
    ...report,
    signals: {
      guard: signalOnClock(guard, skewMs),
      wire: signalOnClock(wire, skewMs),
      heater: signalOnClock(heater, skewMs),
    },
  };
}

/** What a screen shows of a report, without ages and nonces; degrees are rounded, so that they do not flicker. */
function shownFacts(report: RigReport): unknown[] {
  const { guard, wire, heater } = report.signals;
  const degrees = 'actualC' in heater ? [Math.round(heater.actualC / 2), heater.targetC] : [];
  return [
    report.port,
    report.portProblem,
    report.firmware?.name ?? null,
    report.runner,
    report.runId,
    report.holdReason,
    report.workHold,
    report.virtualDisplay,
    guard.reading,
    wire.reading,
    heater.reading,
    ...degrees,
  ];
}

/** Whether a screen must hear of `next` now. At rest, news once a second keep its age fresh. */
export function isNews(
  last: { report: RigReport; heardAtMs: number } | null,
  next: RigReport,
  nowMs: number,
): boolean {
  if (!last) return true;
  if (Math.floor(last.heardAtMs / 1000) !== Math.floor(nowMs / 1000)) return true;
  return JSON.stringify(shownFacts(last.report)) !== JSON.stringify(shownFacts(next));
}
