import { setTimeout as pause } from 'node:timers/promises';
import { EllwandError } from '@/lib/errors';
import type { RigDto } from '@/lib/schemas/floor';
import { readRigPage } from '@/lib/services/floor/read-rig-page';
import { showCode } from '@/lib/services/runs/show-code';
import type { ContextNow } from './actors';

const LOOKS_MOST = 20;
const BETWEEN_LOOKS_MS = 60;

/**
 * Has the code shown and reads it off the virtual rig's display; null where none is fitted.
 * @throws EllwandError `presence-missing` when no new code comes up
 */
export async function readPresenceCode(now: ContextNow, rig: RigDto): Promise<string | null> {
  if (!rig.fitted?.display) return null;
  const before = rig.virtualDisplay;
  const shown = await showCode({ ctx: now(), input: { rigId: rig.id } });
  if (shown.outcome !== 'done') throw new EllwandError('presence-missing');
  for (let look = 0; look < LOOKS_MOST; look += 1) {
    const page = await readRigPage({ ctx: now(), input: { rigId: rig.id } });
    const { virtualDisplay } = page.rig;
    const code = /^CODE (\d+)$/.exec(virtualDisplay ?? '')?.[1];
    if (code !== undefined && virtualDisplay !== before) return code;
    await pause(BETWEEN_LOOKS_MS);
  }
  throw new EllwandError('presence-missing');
}
