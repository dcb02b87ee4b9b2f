import type { VirtualRig } from './rig';

/** Starts rigs, and takes them away on SIGTERM, SIGINT or SIGHUP. @returns when they are gone. */
export async function liveUntilSignal(rigs: VirtualRig[], started: () => void): Promise<void> {
  const signalled = new Promise<void>((resolve) => {
    for (const signal of ['SIGTERM', 'SIGINT', 'SIGHUP'] as const) process.on(signal, () => resolve());
  });
  try {
    await Promise.all(rigs.map((rig) => rig.start()));
    started();
    await signalled;
  } finally {
    await Promise.all(rigs.map((rig) => rig.stop()));
  }
}

/** Says why a program ends, and lets it end with 1. */
export function reportFailure(error: unknown): void {
  const cause = error instanceof Error && error.cause instanceof Error ? ` (${error.cause.message})` : '';
  console.error(`virtual rig: ${error instanceof Error ? error.message : 'failed'}${cause}`);
  process.exitCode = 1;
}
