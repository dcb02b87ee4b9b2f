import type { JobName } from '../definitions';
import type { JobHandler } from './handler';

/** Each handler is loaded when its first job comes. */
const LOADERS: Record<JobName, () => Promise<JobHandler>> = {
  dispatch: async () => (await import('./dispatch')).handleDispatch,
  mail: async () => (await import('./mail')).handleMail,
  'sweep-dispatch': async () => (await import('./sweep-dispatch')).handleSweepDispatch,
  'sweep-silence': async () => (await import('./sweep-silence')).handleSweepSilence,
  'expire-commands': async () => (await import('./expire-commands')).handleExpireCommands,
  'sweep-sign-ins': async () => (await import('./sweep-sign-ins')).handleSweepSignIns,
  'beat-queue': async () => (await import('./beat-queue')).handleBeatQueue,
};

function isJobName(name: string): name is JobName {
  return Object.hasOwn(LOADERS, name);
}

/** The handler of a job by its name; null for a name that no version of ours knows. */
export async function loadHandler(name: string): Promise<JobHandler | null> {
  return isJobName(name) ? LOADERS[name]() : null;
}
