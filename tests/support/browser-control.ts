import { once } from 'node:events';
import { connect } from 'node:net';
import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { z } from 'zod';
import type { ControlRequest } from '@/agent/virtual/core/control-requests';

const answerSchema = z.object({ ok: z.boolean() });

/** Does something to a virtual rig of the demo, as a hand would: opens its guard, pulls its wire. */
export async function touchRig(dataDir: string, rig: string, request: ControlRequest): Promise<void> {
  const socket = connect(join(dataDir, 'demo', 'control', rig));
  try {
    socket.write(`${JSON.stringify(request)}\n`);
    const [line] = (await once(createInterface({ input: socket }), 'line')) as [string];
    if (!answerSchema.parse(JSON.parse(line)).ok) throw new Error(`${rig} does not understand: ${line}`);
  } finally {
    socket.destroy();
  }
}
