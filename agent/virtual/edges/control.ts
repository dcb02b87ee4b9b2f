/**
 * The control socket of a virtual rig: a Unix socket, one JSON object a line in, one JSON object a line out, in
 * order. Good: `{"ok":true,…}`. Not understood: `{"ok":false,"error":"bad-request","details":[…]}`. An `id` of
 * any kind in the request is given back. Times `ms` are wall time.
 *
 *   {"do":"snapshot"}                          answers {"ok":true,"snapshot":{…}}: see core/snapshot.ts
 *   {"do":"guard","open":true}                 opens the guard; where it is wired so, motor power goes with it
 *   {"do":"wire","out":true}                   wire pulled out of the guide, and back in
 *   {"do":"spool-end"}                         the spool ends now, the tail behind the switch is still fed
 *   {"do":"spool","mm":50000}                  a new spool, threaded
 *   {"do":"slip","mean":0.01,"sd":0.002}       share of every feed move that is lost
 *   {"do":"jam","on":true}                     the wheel turns, no wire comes
 *   {"do":"blade","state":"dull","uncut":1}    closings do not sever, with that probability; "new" fits a fresh one
 *   {"do":"power","on":false}                  mains off and on again: a reset
 *   {"do":"motor-power","on":false}            motor supply off, the logic stays alive
 *   {"do":"reset"}                             the reset button
 *   {"do":"error-stop"}                        the firmware stops on an error of its own (M999 revives it)
 *   {"do":"usb","plugged":false}               cable out; {"plugged":true,"path":"…"} back in, maybe by another name
 *   {"do":"noise","kind":"flip","direction":"in","bytes":200,"probability":0.05}
 *                                              flips, drops or doubles bytes; "in" is towards the rig
 *   {"do":"ok","fault":"swallow","count":1}    the next oks are swallowed, doubled or split
 *   {"do":"mute","ms":5000}                    nothing is answered, commands are carried out
 *   {"do":"busy","ms":5000}                    nothing is carried out, `busy` is answered
 *   {"do":"heater","warmsToC":90}              the heater warms by fault; null ends it
 *   {"do":"hand-move","axis":"Z","mm":-2}      somebody turns an axis
 *   {"do":"hand-place","axis":"Z","atMm":0}    somebody puts an axis at a place of the machine's own frame
 */
import { mkdirSync, rmSync } from 'node:fs';
import { createServer, type Socket } from 'node:net';
import { dirname } from 'node:path';
import { createInterface } from 'node:readline';
import { z } from 'zod';
import { controlRequestSchema, type ControlRequest } from '../core/control-requests';

/** Carries one request out. @returns what the answer holds beside `ok`. */
export type Controller = (request: ControlRequest) => Promise<object>;

export interface ControlSocket {
  close: () => Promise<void>;
}

const lineSchema = z.object({ id: z.unknown().optional() }).loose();

async function answer(line: string, controller: Controller): Promise<object> {
  let json: unknown;
  try {
    json = JSON.parse(line);
  } catch {
    return { ok: false, error: 'bad-json' };
  }
  const outer = lineSchema.safeParse(json);
  if (!outer.success) return { ok: false, error: 'bad-request', details: outer.error.issues };
  const { id, ...body } = outer.data;
  const request = controlRequestSchema.safeParse(body);
  if (!request.success) return { id, ok: false, error: 'bad-request', details: request.error.issues };
  try {
    return { id, ok: true, ...(await controller(request.data)) };
  } catch (error) {
    return { id, ok: false, error: 'failed', details: [error instanceof Error ? error.message : 'unknown'] };
  }
}

async function serve(socket: Socket, controller: Controller): Promise<void> {
  for await (const line of createInterface({ input: socket })) {
    if (line.trim() === '') continue;
    const reply = await answer(line, controller);
    if (socket.writable) socket.write(`${JSON.stringify(reply)}\n`);
  }
}

/** Listens on a Unix socket at `path`; one that a killed rig left there is replaced. */
export async function openControl(path: string, controller: Controller): Promise<ControlSocket> {
  mkdirSync(dirname(path), { recursive: true });
  rmSync(path, { force: true });
  const sockets = new Set<Socket>();
  const server = createServer((socket) => {
    sockets.add(socket);
    socket.on('close', () => sockets.delete(socket));
    socket.on('error', () => socket.destroy());
    serve(socket, controller).catch(() => socket.destroy());
  });
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject);
    server.listen(path, resolve);
  });
  return {
    close: () =>
      new Promise((resolve) => {
        for (const socket of sockets) socket.destroy();
        server.close(() => resolve());
      }),
  };
}
