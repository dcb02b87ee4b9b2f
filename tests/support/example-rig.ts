import { DEMO_RIGS } from '@/db/seed/demo/rigs';
import type { Profile } from '@/lib/program/profile';

/** A rig with a guard switch, a wire switch and a display, as the demo's first. */
export function exampleRigProfile(): Profile {
  const [first] = DEMO_RIGS;
  if (!first) throw new Error('The demo has no rig');
  return structuredClone(first.profile);
}
