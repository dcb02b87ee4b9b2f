import { readFileSync, readdirSync } from 'node:fs';

export interface ProcessFacts {
  pid: number;
  parentPid: number;
  /** Resident memory, shared pages included. */
  rssMb: number;
}

/** Of `/proc/PID/status`; undefined for one without memory of its own (kernel, zombie). */
export function parseStatus(pid: number, status: string): ProcessFacts | undefined {
  const parentPid = /^PPid:\s+(\d+)$/m.exec(status)?.[1];
  const rssKb = /^VmRSS:\s+(\d+) kB$/m.exec(status)?.[1];
  if (parentPid === undefined || rssKb === undefined) return undefined;
  return { pid, parentPid: Number(parentPid), rssMb: Number(rssKb) / 1024 };
}

/** All processes of this computer as they are now. */
export function readProcesses(): ProcessFacts[] {
  const pids = readdirSync('/proc').filter((name) => /^\d+$/.test(name));
  return pids.flatMap((pid) => {
    try {
      return parseStatus(Number(pid), readFileSync(`/proc/${pid}/status`, 'utf8')) ?? [];
    } catch {
      // It has ended since it was listed.
      return [];
    }
  });
}

/** A process and all that descend from it. */
export function familyOf(pid: number, processes: readonly ProcessFacts[]): ProcessFacts[] {
  const self = processes.filter((one) => one.pid === pid);
  const children = processes.filter((one) => one.parentPid === pid);
  return [...self, ...children.flatMap((child) => familyOf(child.pid, processes))];
}
