import type { EventSource } from '@/agent/journal/contract';
import type { AgentEvent, EventUpload } from '@/lib/protocol/events';
import { EVENTS_PER_BATCH_MAX } from '@/lib/protocol/version';
import { backOffMs, slowBackOffMs } from './back-off';
import type { Teller, Topic } from './notices';
import { callServer, type Server } from './server-call';
import { uploadStep, type UploadStep } from './upload-step';
import { GATHER_MS, pauseUntil, type Bell } from './waiting';

const UPLOAD_TIMEOUT_MS = 10_000;

interface Parts {
  server: Server;
  random: () => number;
  teller: Teller;
  /** Rung whenever events became durable; null for a journal that gets no more. */
  bell: Bell | null;
  source: EventSource;
}

/**
 * Sends a journal's events in order, one batch at a time, until each is acknowledged. Returns when `closing` is
 * aborted, when it must stop, or when a journal that gets no more is through.
 */
export async function uploadEvents(parts: Parts): Promise<void> {
  const { server, source, bell } = parts;
  let next = source.acknowledged + 1;
  let tries = 0;
  while (!server.closing.aborted) {
    if (next > source.lastSequence) {
      if (!bell) return;
      await bell.wait();
      await pauseUntil(server.clock, GATHER_MS, server.closing);
      continue;
    }
    const step = await sendFrom(parts, next);
    if (step.step === 'stop') return report(parts, step);
    if (step.step === 'stored') {
      next = step.through + 1;
      tries = 0;
      await acknowledge(parts, step.through);
      continue;
    }
    tries += 1;
    if (step.step === 'go-from') next = step.sequence;
    else report(parts, step);
    // The first jump to another number is made at once.
    if (step.step === 'retry' || tries > 1) await waitAfter(parts, step, tries);
  }
}

async function sendFrom({ server, source }: Parts, first: number): Promise<UploadStep> {
  const last = source.lastSequence;
  let events: AgentEvent[];
  try {
    events = await source.eventsFrom(first, EVENTS_PER_BATCH_MAX);
  } catch (cause) {
    return { step: 'retry', code: 'unexpected', slow: false, details: { cause: String(cause) } };
  }
  if (events[0]?.sequence !== first) {
    return { step: 'stop', code: 'journal-gap', details: { expected: first } };
  }
  const body: EventUpload = { protocol: 1, journalId: source.id, events };
  const request = { method: 'POST', path: '/api/agent/events', body, timeoutMs: UPLOAD_TIMEOUT_MS } as const;
  return uploadStep(await callServer(server, request), first, last);
}

async function acknowledge({ source, teller, bell }: Parts, through: number): Promise<void> {
  teller.works(topicOf(bell));
  try {
    await source.acknowledge(through);
    teller.works('acknowledgement');
  } catch (cause) {
    // Only remembered for the next start: the events would go up a second time, and be stored once.
    teller.fails('acknowledgement', 'unexpected', { cause: String(cause) });
  }
}

function report({ server, teller, bell, source }: Parts, step: UploadStep): void {
  if (server.closing.aborted || step.step === 'stored' || step.step === 'go-from') return;
  teller.fails(topicOf(bell), step.code, { journalId: source.id, ...step.details });
}

function waitAfter({ server, random }: Parts, step: UploadStep, tries: number): Promise<void> {
  const slow = step.step === 'retry' && step.slow;
  const ms = slow ? slowBackOffMs(random()) : backOffMs(tries, random());
  return pauseUntil(server.clock, ms, server.closing);
}

function topicOf(bell: Bell | null): Topic {
  return bell ? 'events' : 'earlier-events';
}
