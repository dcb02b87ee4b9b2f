import { reportAnswerSchema, type Report, type RigReport } from '@/lib/protocol/report';
import { REPORT_EVERY_MS } from '@/lib/protocol/version';
import { slowBackOffMs } from './back-off';
import type { Teller } from './notices';
import { callServer, type Server } from './server-call';
import type { SkewMeter } from './skew';
import { isSlow } from './upload-step';
import { GATHER_MS, pauseUntil, type Bell } from './waiting';

/** Changes closer together than this go up in one report. */
const REPORT_GAP_MS = 50;
/** Short: an old report is worth nothing. */
const REPORT_TIMEOUT_MS = 3_000;

interface Parts {
  server: Server;
  random: () => number;
  teller: Teller;
  skew: SkewMeter;
  /** Rung on each change and on closing. */
  bell: Bell;
  software: string;
  journal: { readonly id: string; backlog(): number };
  rigs: () => RigReport[];
}

/** Reports the rigs each second and at once on a change, one report at a time, until `closing` is aborted. */
export async function reportRigs(parts: Parts): Promise<void> {
  const { clock, closing } = parts.server;
  while (!closing.aborted) {
    const sentMs = clock.nowMs();
    const pauseMs = await sendReport(parts);
    await pauseUntil(clock, Math.max(pauseMs, REPORT_GAP_MS - (clock.nowMs() - sentMs)), closing);
    if (closing.aborted) return;
    const restMs = REPORT_EVERY_MS - (clock.nowMs() - sentMs);
    if (restMs > 0) await parts.bell.wait({ clock, ms: restMs });
    await pauseUntil(clock, GATHER_MS, closing);
  }
}

/** @returns ms to wait before the next one, 0 when all is well */
async function sendReport(parts: Parts): Promise<number> {
  const { server, teller, skew, random } = parts;
  parts.bell.hush();
  const body: Report = {
    protocol: 1,
    sentAt: server.clock.date().toISOString(),
    software: parts.software,
    journalId: parts.journal.id,
    backlog: parts.journal.backlog(),
    rigs: parts.rigs(),
  };
  const request = { method: 'POST', path: '/api/agent/report', body, timeoutMs: REPORT_TIMEOUT_MS } as const;
  const result = await callServer(server, request);
  if (server.closing.aborted) return 0;
  if (!result.ok) {
    teller.fails('reports', result.code, result.details);
    return isSlow(result.code) ? slowBackOffMs(random()) : REPORT_EVERY_MS;
  }
  const answer = reportAnswerSchema.safeParse(result.body);
  if (!answer.success) {
    teller.fails('reports', 'unexpected');
    return REPORT_EVERY_MS;
  }
  skew.add(result.sentAt, result.roundTripMs, new Date(answer.data.serverAt));
  teller.works('reports');
  return 0;
}
