import type { Log, LogLevel } from '@/agent/log';
import type { Recorder } from '@/agent/rig/recorder';
import { logText } from '@/lib/fleet/log-text';
import type { EventBody, EventKind } from '@/lib/protocol/events';

/** One piece a second and rig is more than a small computer's card should write twice. */
const LEVELS: Partial<Record<EventKind, LogLevel>> = {
  'piece-cut': 'debug',
  'trim-cut': 'debug',
  'rig-lost': 'warning',
  'program-refused': 'warning',
  'piece-doubted': 'warning',
  misfeed: 'warning',
  'run-held': 'warning',
  'guard-opened': 'warning',
};

/** The same recorder, which also writes what it records into the agent's log under the rig's name. */
export function loggedRecorder(recorder: Recorder, log: Log, rig: string): Recorder {
  return {
    event(body, at) {
      log({ level: LEVELS[body.kind] ?? 'info', rig, code: body.kind, message: wordsOf(body) });
      return recorder.event(body, at);
    },
    note: (note) => recorder.note(note),
    memoryOf: (rigId) => recorder.memoryOf(rigId),
    get full() {
      return recorder.full;
    },
  };
}

function wordsOf(body: EventBody): string {
  const kind = body.kind.replaceAll('-', ' ');
  const text = logText(body);
  return text === '' ? kind : `${kind}: ${text}`;
}
