import { once } from 'node:events';
import { connect, createServer, type AddressInfo, type Socket } from 'node:net';

/** A network cable between a browser and the house: what goes through it can be cut. */
export interface Relay {
  url: string;
  /** Cuts every connection and takes no new one. Chromium's own offline mode leaves an open event stream alone. */
  cut(): void;
  mend(): void;
  close(): Promise<void>;
}

/** Opens a relay to the house at `url`, on a free port. */
export async function openRelay(url: string): Promise<Relay> {
  const { hostname, port } = new URL(url);
  const open = new Set<Socket>();
  let isCut = false;
  const keep = (socket: Socket) => {
    open.add(socket);
    socket.once('close', () => open.delete(socket));
    // A connection that is cut in the middle is what this is for.
    socket.on('error', () => socket.destroy());
  };
  const destroyAll = () => {
    for (const socket of open) socket.destroy();
  };
  const server = createServer((near) => {
    if (isCut) {
      near.destroy();
      return;
    }
    const far = connect(Number(port), hostname);
    for (const socket of [near, far]) keep(socket);
    near.pipe(far).pipe(near);
    near.once('close', () => far.destroy());
    far.once('close', () => near.destroy());
  });
  server.listen(0, '127.0.0.1');
  await once(server, 'listening');
  return {
    url: `http://127.0.0.1:${(server.address() as AddressInfo).port}`,
    cut: () => {
      isCut = true;
      destroyAll();
    },
    mend: () => {
      isCut = false;
    },
    close: async () => {
      destroyAll();
      server.close();
      await once(server, 'close');
    },
  };
}
