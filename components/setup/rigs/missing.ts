import type { RigSetupDto } from '@/lib/schemas/setup-rigs';

/** What a rig lacks before it can cut, in the order in which it is set up; a blade is kept book of, not needed. */
export function missingOf(rig: RigSetupDto): string[] {
  const parts: [string, boolean][] = [
    ['a profile', rig.profileVersion === null],
    ['interlock notes', rig.notesVersion === null],
    ['an agent', rig.agentId === null],
    ['a spool', rig.spool === null],
  ];
  return parts.filter(([, isMissing]) => isMissing).map(([part]) => part);
}
