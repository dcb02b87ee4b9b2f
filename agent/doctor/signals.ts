import type { Signals } from '@/lib/protocol/signals';
import type { Problem } from './findings';

/** Readings that keep a run from starting. */
export function signalProblems(rig: string, { guard, wire, heater }: Signals): Problem[] {
  const problem = (code: string, says: string, toDo: string): Problem => ({
    about: 'rig',
    rig,
    code,
    says,
    toDo,
  });
  const found: Problem[] = [];
  if (guard.reading === 'open') found.push(problem('guard-open', 'The guard is open.', 'Shut it.'));
  if (guard.reading === 'unknown') found.push(unread('guard'));
  if (wire.reading === 'missing') {
    found.push(problem('wire-missing', 'No wire is at the guide.', 'Thread it in.'));
  }
  if (wire.reading === 'unknown') found.push(unread('wire'));
  if (heater.reading === 'on' || heater.reading === 'warm') {
    const says = `A heater is ${heater.reading}: ${heater.actualC} °C, target ${heater.targetC} °C.`;
    found.push(problem('heater-warm', says, 'Unplug the heater: a rig needs none.'));
  }
  if (heater.reading === 'unknown') found.push(unread('heater'));
  return found;

  function unread(what: 'guard' | 'wire' | 'heater'): Problem {
    const says = `The ${what} is fitted by the profile, and the firmware does not tell it.`;
    return problem(
      `${what}-unread`,
      says,
      'Look at its plug on the board, and at the profile in the set-up.',
    );
  }
}
