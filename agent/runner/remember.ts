import type { AgentEvent, EventBody } from '@/lib/protocol/events';
import { freshMemory, freshRun, type Remembered, type RememberedRun } from './memory';
import type { JournalNote } from './notes';

/** An entry of the journal, event or note. */
export type Entry = { type: 'event'; event: Pick<AgentEvent, 'body'> } | { type: 'note'; note: JournalNote };

const TAKEN_MAX = 200;

function rememberEvent(memory: Remembered, body: EventBody): void {
  switch (body.kind) {
    case 'program-held':
      memory.run = freshRun(body.runId);
      return;
    case 'program-dropped':
      memory.run = null;
      return;
    case 'work-hold-began':
      memory.workHold = body.personId;
      return;
    case 'work-hold-ended':
      memory.workHold = null;
      return;
    default:
      if (memory.run && 'runId' in body && body.runId === memory.run.runId) rememberOfRun(memory.run, body);
  }
}

function rememberOfRun(run: RememberedRun, body: EventBody): void {
  switch (body.kind) {
    case 'run-started':
      run.began = true;
      return;
    case 'piece-cut':
      run.cut = Math.max(run.cut, body.piece);
      run.openCut = null;
      return;
    case 'piece-doubted':
      run.doubt = body.piece;
      return;
    case 'piece-settled':
      run.doubt = null;
      run.openCut = null;
      if (body.answer === 'count') run.cut = Math.max(run.cut, body.piece);
      return;
    case 'run-paused':
      run.paused = true;
      return;
    case 'run-held':
      run.hold = body.reason;
      run.paused = false;
      return;
    case 'run-went-on':
      if (run.hold === 'first-pieces') run.measureFrom = null;
      run.hold = null;
      run.paused = false;
      return;
    case 'run-ended':
      run.ended = true;
      return;
    default:
  }
}

function rememberNote(memory: Remembered, note: JournalNote): void {
  const { run } = memory;
  if (note.note === 'fence') memory.fence = Math.max(memory.fence, note.fence);
  if (note.note === 'command-taken') memory.taken = [...memory.taken, note.commandId].slice(-TAKEN_MAX);
  if (!run || !('runId' in note) || note.runId !== run.runId) return;
  switch (note.note) {
    case 'homing':
      Object.assign(run, { registered: false, standbyCount: null, mustHome: false, measureAgain: false });
      if (note.measureAgain) run.measureFrom = run.cut;
      return;
    case 'registered':
      Object.assign(run, { registered: true, standbyCount: note.standbyCount });
      return;
    case 'cut-commanded':
      run.openCut = note.piece;
      return;
    case 'cut-void':
      run.openCut = null;
      return;
    case 'must-home':
      Object.assign(run, { mustHome: true, measureAgain: note.measureAgain });
      return;
    case 'measure-again':
      run.measureFrom = run.cut;
      return;
    case 'run-stopping':
      run.stop = { personId: note.personId };
      return;
    case 'tray-cleared':
      memory.run = null;
      return;
  }
}

/** Folds one entry into what each rig must still know. */
export function rememberEntry(rigs: Map<string, Remembered>, entry: Entry): void {
  if (entry.type === 'note' && entry.note.note === 'snapshot') {
    rigs.clear();
    for (const { rigId, memory } of entry.note.rigs) rigs.set(rigId, structuredClone(memory));
    return;
  }
  const said = entry.type === 'event' ? entry.event.body : entry.note;
  if (!('rigId' in said)) return;
  const memory = rigs.get(said.rigId) ?? freshMemory();
  rigs.set(said.rigId, memory);
  if (entry.type === 'event') rememberEvent(memory, entry.event.body);
  else rememberNote(memory, entry.note);
}

/** Folds the journal into what each rig must still know. */
export function remember(history: Iterable<Entry>): Map<string, Remembered> {
  const rigs = new Map<string, Remembered>();
  for (const entry of history) rememberEntry(rigs, entry);
  return rigs;
}
